import { Link } from 'react-router';
import { rowStatuses, type RowStatus } from '~/models/import-types';
import { formatCount } from '~/format/number';
import { statusWords } from './import-words';

interface StatusLinksProps {
  counts: Readonly<Record<RowStatus, number>>;
  current: RowStatus;
  hrefFor: (status: RowStatus) => string;
}

/** How many rows there are of each status; each leads to its rows. */
export function StatusLinks({ counts, current, hrefFor }: StatusLinksProps) {
  return (
    <nav aria-label="Rows by what becomes of them" className="border-hair my-4 border-y">
      <ul className="grid grid-cols-2 gap-x-6 md:flex md:gap-x-10">
        {rowStatuses.map((status) => (
          <li key={status}>
            <Link
              to={hrefFor(status)}
              preventScrollReset
              aria-current={status === current ? 'page' : undefined}
              className="aria-[current]:border-ink flex min-h-13 items-baseline gap-2 border-b-[3px] border-transparent py-2.5 text-current no-underline hover:underline"
            >
              <b
                className={`tabular text-[1.25rem] ${status === 'rejected' && counts.rejected > 0 ? 'text-danger' : ''}`}
              >
                {formatCount(counts[status])}
              </b>
              <span className={status === current ? 'font-bold' : ''}>
                {statusWords[status].toLowerCase()}
              </span>
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}
