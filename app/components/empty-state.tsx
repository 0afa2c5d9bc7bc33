import type { ReactNode } from 'react';

/** Says why there is nothing here and what to do about it. */
export function EmptyState({
  title,
  children,
  action,
}: {
  title: string;
  children?: ReactNode;
  action?: ReactNode;
}) {
  return (
    <div className="border-hair my-6 border-y py-8">
      <p className="text-[1.15rem] font-bold">{title}</p>
      {children != null && <div className="mt-1 max-w-[52ch]">{children}</div>}
      {action != null && <div className="mt-5">{action}</div>}
    </div>
  );
}
