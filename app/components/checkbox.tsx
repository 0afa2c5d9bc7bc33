import type { InputHTMLAttributes } from 'react';

import { controlProps, FieldErrors, type FieldTexts } from './field';

type CheckboxProps = FieldTexts &
  Omit<
    InputHTMLAttributes<HTMLInputElement>,
    keyof FieldTexts | 'aria-describedby' | 'aria-invalid' | 'type'
  >;

/** One thing to tick, as a row; the whole row is the target. */
export function Checkbox({ label, hint, errors, name, id = name, ...input }: CheckboxProps) {
  return (
    <div className="my-2">
      <label className="pick-row">
        <input
          type="checkbox"
          name={name}
          value="on"
          {...input}
          {...controlProps({ name, id, label, hint, errors })}
        />
        <span>{label}</span>
      </label>
      {hint != null && (
        <div id={`${id}-hint`} className="text-grey mt-1 text-[0.9rem]">
          {hint}
        </div>
      )}
      <FieldErrors id={id} errors={errors} />
    </div>
  );
}
