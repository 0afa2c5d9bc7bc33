import type { SelectHTMLAttributes } from 'react';

import { CONTROL_CLASS, Field, type FieldTexts } from './field';

export interface SelectOption {
  value: string;
  label: string;
}

type SelectFieldProps = FieldTexts & {
  options: readonly SelectOption[];
  /** Words for "none chosen", with the empty value; left out when something must always be chosen. */
  emptyLabel?: string;
} & Omit<
    SelectHTMLAttributes<HTMLSelectElement>,
    keyof FieldTexts | 'aria-describedby' | 'aria-invalid' | 'children'
  >;

/** A field to choose one of many; for up to about six choices radio rows are quicker. */
export function SelectField({
  name,
  id,
  label,
  hint,
  errors,
  options,
  emptyLabel,
  className = '',
  ...select
}: SelectFieldProps) {
  return (
    <Field name={name} id={id} label={label} hint={hint} errors={errors}>
      {(control) => (
        <select name={name} {...select} {...control} className={`${CONTROL_CLASS} ${className}`}>
          {emptyLabel !== undefined && <option value="">{emptyLabel}</option>}
          {options.map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}
