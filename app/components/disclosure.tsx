import type { ReactNode } from 'react';

/** Something that opens: works without JavaScript, closed unless said otherwise. */
export function Disclosure({
  summary,
  open,
  children,
}: {
  summary: ReactNode;
  open?: boolean;
  children: ReactNode;
}) {
  return (
    <details open={open} className="border-hair border-b">
      <summary className="plus-summary">{summary}</summary>
      <div className="pb-4">{children}</div>
    </details>
  );
}
