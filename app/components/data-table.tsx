import type { ReactNode } from 'react';

import { DataTableHead } from './data-table-head';
import { TABLE_ROLE } from './table-role';

export interface Sort {
  key: string;
  direction: 'asc' | 'desc';
}

export interface Column<Row> {
  key: string;
  header: string;
  cell: (row: Row) => ReactNode;
  sortable?: boolean;
  /** Direction of the first click on the header; figures are mostly wanted largest first. */
  firstDirection?: Sort['direction'];
  /** Figures stand at the end of their column. */
  align?: 'start' | 'end';
  /** The column that names the row; one a table. */
  rowHeader?: boolean;
}

interface DataTableProps<Row> {
  caption: string;
  captionHidden?: boolean;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  sort?: Sort;
  /** Address of this list sorted so, all its other state kept; headers are plain text without it. */
  hrefFor?: (sort: Sort) => string;
  /** In place of the table when there are no rows. */
  empty?: ReactNode;
}

/**
 * A table whose headers sort by link. On a phone each row is set as a card with the column's name before
 * every value.
 */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const { caption, captionHidden = false, columns, rows, rowKey, sort, hrefFor, empty } = props;
  if (rows.length === 0 && empty != null) return <>{empty}</>;
  return (
    <table className="data-table" role="table">
      <caption className={captionHidden ? 'sr-only' : undefined}>{caption}</caption>
      <DataTableHead columns={columns} sort={sort} hrefFor={hrefFor} />
      <tbody {...TABLE_ROLE.rowgroup}>
        {rows.map((row) => (
          <tr key={rowKey(row)} role="row">
            {columns.map((column) => (
              <DataTableCell key={column.key} column={column} row={row} />
            ))}
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function DataTableCell<Row>({ column, row }: { column: Column<Row>; row: Row }) {
  const className = column.align === 'end' ? 'end' : undefined;
  const content = (
    <>
      <span className="data-table-label" aria-hidden="true">
        {column.header}
      </span>
      <span>{column.cell(row)}</span>
    </>
  );
  return column.rowHeader ? (
    <th scope="row" {...TABLE_ROLE.rowheader} className={className}>
      {content}
    </th>
  ) : (
    <td {...TABLE_ROLE.cell} className={className}>
      {content}
    </td>
  );
}
