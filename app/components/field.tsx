import type { ReactNode } from 'react';

/** What a control needs so that its hint and its error are read with it. */
export interface ControlProps {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** Props of every field; `id` defaults to `name`, errors are whole sentences. */
export interface FieldTexts {
  name: string;
  id?: string;
  label: ReactNode;
  hint?: ReactNode;
  errors?: readonly string[];
}

/** Ids of a field's hint and error, and the attributes that tie its control to them. */
export function controlProps({ name, id = name, hint, errors = [] }: FieldTexts): ControlProps {
  const described = [hint != null && `${id}-hint`, errors.length > 0 && `${id}-error`].filter(Boolean);
  return {
    id,
    'aria-describedby': described.length > 0 ? described.join(' ') : undefined,
    'aria-invalid': errors.length > 0 || undefined,
  };
}

/** The errors of one field, beside it. */
export function FieldErrors({ id, errors = [] }: { id: string; errors?: readonly string[] }) {
  if (errors.length === 0) return null;
  return (
    <div id={`${id}-error`} className="text-danger mt-1 font-bold">
      {errors.map((error) => (
        <p key={error}>{error}</p>
      ))}
    </div>
  );
}

/** Label, hint, control and errors in reading order. */
export function Field({
  children,
  ...texts
}: FieldTexts & { children: (control: ControlProps) => ReactNode }) {
  const { name, id = name, label, hint, errors } = texts;
  return (
    <div className="my-4">
      <label htmlFor={id} className="block font-bold">
        {label}
      </label>
      {hint != null && (
        <div id={`${id}-hint`} className="text-grey text-[0.9rem]">
          {hint}
        </div>
      )}
      <div className="mt-1.5">{children(controlProps(texts))}</div>
      <FieldErrors id={id} errors={errors} />
    </div>
  );
}

/** The look shared by text boxes and select boxes. */
export const CONTROL_CLASS =
  'bg-sheet border-rule aria-invalid:border-danger block w-full max-w-112 min-h-11 rounded border-[1.5px] px-3 py-2 aria-invalid:border-2 max-md:min-h-13 max-md:max-w-none';
