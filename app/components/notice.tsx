import type { ReactNode } from 'react';

export type NoticeTone = 'status' | 'warning' | 'danger';

const TONE: Record<NoticeTone, { border: string; text: string }> = {
  status: { border: 'border-slate', text: 'text-slate' },
  warning: { border: 'border-amber', text: 'text-amber' },
  danger: { border: 'border-danger', text: 'text-danger' },
};

interface NoticeProps {
  tone?: NoticeTone;
  title?: ReactNode;
  /** Read out at once when it appears after an action; left out for what was there from the start. */
  announce?: boolean;
  children?: ReactNode;
}

/** A few sentences set off by a coloured rule; the title says what kind of notice it is. */
export function Notice({ tone = 'status', title, announce = false, children }: NoticeProps) {
  const role = announce ? (tone === 'danger' ? 'alert' : 'status') : undefined;
  return (
    <div role={role} className={`my-4 border-l-4 py-1.5 pl-4 ${TONE[tone].border}`}>
      {title != null && <p className={`font-bold ${TONE[tone].text}`}>{title}</p>}
      {children}
    </div>
  );
}
