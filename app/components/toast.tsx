import type { ReactNode } from 'react';
import { Form } from 'react-router';

export interface UndoForm {
  /** Where the undoing is posted. */
  action: string;
  /** Hidden fields of that form. */
  fields: Readonly<Record<string, string>>;
  label?: string;
}

/** What has just been done, said once at the top of the next page, with a way back where there is one. */
export function Toast({ children, undo }: { children: ReactNode; undo?: UndoForm }) {
  return (
    <div
      role="status"
      className="bg-ink text-paper no-print flex flex-wrap items-center gap-x-6 gap-y-1 px-[1.05rem] py-2.5 md:px-[2.35rem]"
    >
      <p className="grow">{children}</p>
      {undo !== undefined && (
        <Form method="post" action={undo.action}>
          {Object.entries(undo.fields).map(([name, value]) => (
            <input key={name} type="hidden" name={name} value={value} />
          ))}
          <button type="submit" className="min-h-11 px-2 font-bold underline focus-visible:outline-current">
            {undo.label ?? 'Undo'}
          </button>
        </Form>
      )}
    </div>
  );
}
