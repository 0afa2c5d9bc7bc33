import type { ReactNode } from 'react';

/** Something that opens: works without JavaScript, closed unless said otherwise. */
export function Disclosure({
  summary,
  open,
  onToggle,
  children,
}: {
  summary: ReactNode;
  open?: boolean;
  onToggle?: (isOpen: boolean) => void;
  children: ReactNode;
}) {
  return (
    <details
      open={open}
      onToggle={onToggle && ((event) => onToggle(event.currentTarget.open))}
      className="border-hair border-b"
    >
      <summary className="plus-summary">{summary}</summary>
      <div className="pb-4">{children}</div>
    </details>
  );
}
