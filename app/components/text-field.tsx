import type { InputHTMLAttributes, TextareaHTMLAttributes } from 'react';

import { CONTROL_CLASS, Field, type FieldTexts } from './field';

type TextFieldProps = FieldTexts &
  Omit<InputHTMLAttributes<HTMLInputElement>, keyof FieldTexts | 'aria-describedby' | 'aria-invalid'>;

/** A one-line field: text, number, date, password, search… by `type`. */
export function TextField({ name, id, label, hint, errors, className = '', ...input }: TextFieldProps) {
  return (
    <Field name={name} id={id} label={label} hint={hint} errors={errors}>
      {(control) => (
        <input name={name} type="text" {...input} {...control} className={`${CONTROL_CLASS} ${className}`} />
      )}
    </Field>
  );
}

type TextAreaFieldProps = FieldTexts &
  Omit<TextareaHTMLAttributes<HTMLTextAreaElement>, keyof FieldTexts | 'aria-describedby' | 'aria-invalid'>;

/** A field of several lines. */
export function TextAreaField({
  name,
  id,
  label,
  hint,
  errors,
  className = '',
  ...input
}: TextAreaFieldProps) {
  return (
    <Field name={name} id={id} label={label} hint={hint} errors={errors}>
      {(control) => (
        <textarea name={name} rows={3} {...input} {...control} className={`${CONTROL_CLASS} ${className}`} />
      )}
    </Field>
  );
}
