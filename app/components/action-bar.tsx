import type { ReactNode } from 'react';

/** The one thing to do on a form: kept in sight above the bottom bar of a phone, in the flow at a desk. */
export function ActionBar({ note, children }: { note?: ReactNode; children: ReactNode }) {
  return (
    <div className="action-bar">
      {note != null && <p className="text-slate mb-2 text-[0.9rem]">{note}</p>}
      <div className="flex flex-wrap gap-3">{children}</div>
    </div>
  );
}
