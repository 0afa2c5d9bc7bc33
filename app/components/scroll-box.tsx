import type { ReactNode } from 'react';

/** Holds what is wider than a phone: it scrolls sideways, by touch and by keyboard, and says what it holds. */
export function ScrollBox({ label, children }: { label: string; children: ReactNode }) {
  const reachable = { tabIndex: 0 };
  return (
    <div className="overflow-x-auto py-1" role="group" aria-label={label} {...reachable}>
      {children}
    </div>
  );
}
