import type { ReactNode } from 'react';

import { controlProps, FieldErrors, type FieldTexts } from './field';

export interface RadioRow {
  value: string;
  label: ReactNode;
  /** A few quiet words at the end of the row: "9 before". */
  aside?: ReactNode;
}

type RadioRowsProps = FieldTexts & {
  rows: readonly RadioRow[];
  defaultValue?: string;
  required?: boolean;
};

/** One choice among few, as rows as wide as the screen and tall enough for a gloved thumb. */
export function RadioRows({ rows, defaultValue, required, ...texts }: RadioRowsProps) {
  const { name, id = name, label, hint, errors } = texts;
  const control = controlProps(texts);
  return (
    <fieldset
      role="radiogroup"
      className="my-4"
      id={id}
      aria-describedby={control['aria-describedby']}
      aria-invalid={control['aria-invalid']}
    >
      <legend className="text-[1.1rem] font-bold">{label}</legend>
      {hint != null && (
        <div id={`${id}-hint`} className="text-grey text-[0.9rem]">
          {hint}
        </div>
      )}
      <FieldErrors id={id} errors={errors} />
      {rows.map((row) => (
        <label key={row.value} className="pick-row">
          <input
            type="radio"
            name={name}
            value={row.value}
            defaultChecked={row.value === defaultValue}
            required={required}
          />
          <span>{row.label}</span>
          {row.aside != null && <span className="pick-row-aside">{row.aside}</span>}
        </label>
      ))}
    </fieldset>
  );
}
