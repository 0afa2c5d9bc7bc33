import type { RowStatus } from '~/models/import-types';
import type { ImportRow } from '~/models/imports.server';
import { DataTable, type Column } from '../data-table';
import { formatCount } from '~/format/number';
import { statusWords } from './import-words';

const remarkHeaders: Record<RowStatus, string | null> = {
  new: null,
  changed: 'What changes',
  unchanged: 'Remark',
  rejected: 'Why it is rejected',
};

interface RowTableProps {
  rows: readonly ImportRow[];
  status: RowStatus;
  /** The headings of the file, in its order. */
  headings: readonly string[];
}

/** Rows of one status: where each stands in the file, what it says, and what is to be said of it. */
export function RowTable({ rows, status, headings }: RowTableProps) {
  const remarkHeader = remarkHeaders[status];
  const columns: Column<ImportRow>[] = [
    { key: 'line', header: 'Line', rowHeader: true, cell: ({ line }) => <Line line={line} /> },
    { key: 'row', header: 'The row', cell: ({ cells }) => <Cells cells={cells} headings={headings} /> },
  ];
  const remarked = status !== 'unchanged' || rows.some(({ remarks }) => remarks.length > 0);
  if (remarkHeader !== null && remarked) {
    columns.push({ key: 'remarks', header: remarkHeader, cell: (row) => <Remarks row={row} /> });
  }
  return (
    <DataTable
      caption={`${statusWords[status]} rows`}
      captionHidden
      columns={columns}
      rows={rows}
      rowKey={({ line }) => String(line)}
    />
  );
}

function Line({ line }: { line: number }) {
  return (
    <>
      <span className="md:sr-only">Line </span>
      {formatCount(line)}
    </>
  );
}

function Cells({ cells, headings }: { cells: ImportRow['cells']; headings: readonly string[] }) {
  const filled = headings.flatMap((heading) => {
    const cell = cells[heading]?.trim();
    return cell ? [{ heading, cell }] : [];
  });
  return (
    <span className="text-[0.95rem] [overflow-wrap:anywhere]">
      {filled.map(({ heading, cell }, index) => (
        <span key={heading}>
          {index > 0 && <span className="text-grey"> · </span>}
          <span className="text-grey">{heading} </span>
          <Value text={cell} />
        </span>
      ))}
    </span>
  );
}

function Remarks({ row: { status, remarks } }: { row: ImportRow }) {
  if (remarks.length === 0) return null;
  return (
    <ul className="grid gap-1 [overflow-wrap:anywhere]">
      {remarks.map(({ column, value, reason }) => (
        <li key={`${column}-${reason}`}>
          {column !== '' && <b>{column} </b>}
          {status === 'changed' ? (
            <>
              {value === '' ? 'is cleared' : <Value text={value} />}, <Value text={reason} />
            </>
          ) : (
            <>
              {value !== '' && (
                <>
                  “<Value text={value} />”{' '}
                </>
              )}
              {reason}
            </>
          )}
        </li>
      ))}
    </ul>
  );
}

const shownLength = 160;
const unbrokenLength = 16;

/** A cell's text, shortened when it is long, and kept in one piece when it is short: a date breaks at no hyphen. */
function Value({ text }: { text: string }) {
  if (text.length <= unbrokenLength) return <span className="whitespace-nowrap">{text}</span>;
  return text.length > shownLength ? `${text.slice(0, shownLength)}…` : text;
}
