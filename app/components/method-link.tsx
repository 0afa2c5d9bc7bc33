import type { ReactNode } from 'react';
import { href, Link } from 'react-router';

/** The label of a number as a link to how it is made. */
export function MethodLink({ id, children }: { id: string; children: ReactNode }) {
  return (
    <Link
      to={`${href('/methods')}#${id}`}
      className="decoration-hair underline underline-offset-3 hover:decoration-current"
    >
      {children}
    </Link>
  );
}
