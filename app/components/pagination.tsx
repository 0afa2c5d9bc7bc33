import { Link } from 'react-router';

import { formatCount } from '~/format/number';

interface PaginationProps {
  /** From 1. */
  page: number;
  pageSize: number;
  total: number;
  /** Address of this list's page n, all its other state kept. */
  hrefFor: (page: number) => string;
  /** What is listed, in the plural: "classes". */
  noun: string;
}

const STEP = 'inline-flex min-h-11 items-center px-1';

/** Where one is in a long list, and links to the pages beside. Nothing but the count when one page holds it. */
export function Pagination({ page, pageSize, total, hrefFor, noun }: PaginationProps) {
  const pages = Math.max(1, Math.ceil(total / pageSize));
  const current = Math.min(Math.max(1, page), pages);
  const first = total === 0 ? 0 : (current - 1) * pageSize + 1;
  const last = Math.min(total, current * pageSize);
  return (
    <nav aria-label={`Pages of ${noun}`} className="no-print my-4 flex flex-wrap items-center gap-x-6">
      <p className="text-grey tabular text-[0.9rem]">
        {formatCount(first)} to {formatCount(last)} of {formatCount(total)} {noun}
      </p>
      {pages > 1 && (
        <ul className="flex flex-wrap items-center gap-x-4">
          {current > 1 && (
            <li>
              <Link rel="prev" className={STEP} to={hrefFor(current - 1)}>
                Previous
              </Link>
            </li>
          )}
          <li aria-current="page" className="tabular font-bold">
            Page {formatCount(current)} of {formatCount(pages)}
          </li>
          {current < pages && (
            <li>
              <Link rel="next" className={STEP} to={hrefFor(current + 1)}>
                Next
              </Link>
            </li>
          )}
        </ul>
      )}
    </nav>
  );
}
