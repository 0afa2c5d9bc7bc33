import { Link } from 'react-router';

import type { Column, Sort } from './data-table';
import { TABLE_ROLE } from './table-role';

interface DataTableHeadProps<Row> {
  columns: readonly Column<Row>[];
  sort: Sort | undefined;
  hrefFor: ((sort: Sort) => string) | undefined;
}

/** The headers: links that sort, keeping the rest of the address; a second click turns the order round. */
export function DataTableHead<Row>({ columns, sort, hrefFor }: DataTableHeadProps<Row>) {
  const anySortable = hrefFor !== undefined && columns.some((column) => column.sortable);
  return (
    <thead {...TABLE_ROLE.rowgroup}>
      {anySortable && (
        <tr className="data-table-sortby" aria-hidden="true">
          <td>Sort by</td>
        </tr>
      )}
      <tr role="row">
        {columns.map((column) => {
          const sorted = sort?.key === column.key ? sort.direction : undefined;
          const sortable = hrefFor !== undefined && column.sortable === true;
          return (
            <th
              key={column.key}
              scope="col"
              role="columnheader"
              className={[column.align === 'end' && 'end', sortable && 'sortable'].filter(Boolean).join(' ')}
              aria-sort={sorted && (sorted === 'asc' ? 'ascending' : 'descending')}
            >
              {sortable ? (
                <Link
                  className="data-table-sort"
                  preventScrollReset
                  to={hrefFor({ key: column.key, direction: nextDirection(sorted, column.firstDirection) })}
                >
                  {column.header}
                  <SortMark sorted={sorted} />
                </Link>
              ) : (
                column.header
              )}
            </th>
          );
        })}
      </tr>
    </thead>
  );
}

function nextDirection(
  sorted: Sort['direction'] | undefined,
  first: Sort['direction'] = 'asc',
): Sort['direction'] {
  if (sorted === undefined) return first;
  return sorted === 'asc' ? 'desc' : 'asc';
}

function SortMark({ sorted }: { sorted: Sort['direction'] | undefined }) {
  if (sorted === undefined) return null;
  return (
    <svg viewBox="0 0 10 10" className="h-[0.6em] w-[0.6em] flex-none" aria-hidden="true" focusable="false">
      <path d={sorted === 'asc' ? 'M5 1 9.5 9H.5Z' : 'M5 9 .5 1H9.5Z'} fill="currentColor" />
    </svg>
  );
}
