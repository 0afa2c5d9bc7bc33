import type { ReactNode } from 'react';

import { controlProps, FieldErrors, type FieldTexts } from '../field';

type ChoicePairProps = FieldTexts & {
  choices: readonly { value: string; label: ReactNode }[];
  defaultValue?: string;
};

/** Two choices side by side, each as large as a button; plain radio buttons underneath. */
export function ChoicePair({ choices, defaultValue, ...texts }: ChoicePairProps) {
  const { name, id = name, label, hint, errors } = texts;
  const control = controlProps(texts);
  return (
    <fieldset id={id} aria-describedby={control['aria-describedby']}>
      <legend className="text-[1.1rem] font-bold">{label}</legend>
      {hint != null && (
        <div id={`${id}-hint`} className="text-grey text-[0.9rem]">
          {hint}
        </div>
      )}
      <FieldErrors id={id} errors={errors} />
      <div className="mt-2 grid grid-cols-2 gap-2.5 md:max-w-112">
        {choices.map((choice) => (
          <label
            key={choice.value}
            className="border-ink has-checked:bg-ink has-checked:text-paper has-focus-visible:outline-slate relative flex min-h-14 items-center justify-center rounded border-[1.5px] px-2 py-1 text-center leading-tight has-checked:font-bold has-focus-visible:outline-3 has-focus-visible:outline-offset-2"
          >
            <input
              type="radio"
              name={name}
              value={choice.value}
              defaultChecked={choice.value === defaultValue}
              className="absolute inset-0 size-full cursor-pointer opacity-0"
            />
            {choice.label}
          </label>
        ))}
      </div>
    </fieldset>
  );
}
