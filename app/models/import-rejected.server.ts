import { stringify } from 'csv-stringify/sync';
import type { Database } from '../../db/connection';
import { remarkColumns } from './import-columns';
import { guardFormula } from './import-formula-guard';
import type { ImportHeader } from './import-header';
import type { CellRemark, ImportKind } from './import-types';

const batchSize = 1000;

interface RejectedRow {
  readonly line: number;
  readonly cells: Record<string, string>;
  readonly reasons: CellRemark[];
}

/**
 * The rejected rows of an import as a CSV file in pieces: the columns they came in, then the line and the
 * reasons. It can be corrected and uploaded again as it is. Cells a spreadsheet would take for a formula are
 * made harmless, and come back as they were.
 */
export async function* rejectedCsv(
  db: Database,
  { id, kind, header }: { id: string; kind: ImportKind; header: ImportHeader },
): AsyncGenerator<string> {
  const headings = header.headings.filter((heading) => heading !== '' && !isRemark(heading));
  if (kind === 'history' && !headings.some((heading) => heading.toLowerCase() === 'occurrence')) {
    headings.push('occurrence');
  }
  const write = (rows: readonly (readonly string[])[]) =>
    stringify(
      rows.map((row) => row.map(guardFormula)),
      { delimiter: header.delimiter, record_delimiter: '\r\n' },
    );
  // The byte-order mark tells spreadsheets that this is UTF-8.
  yield `\ufeff${write([[...headings, ...remarkColumns]])}`;
  let lastLine = 0;
  for (;;) {
    const rows = await db('import_rows')
      .where({ import_id: id, status: 'rejected' })
      .where('line', '>', lastLine)
      .orderBy('line')
      .limit(batchSize)
      .select<RejectedRow[]>('line', 'cells', 'reasons');
    if (rows.length === 0) return;
    yield write(
      rows.map(({ line, cells, reasons }) => [
        ...headings.map((heading) => cells[heading] ?? ''),
        String(line),
        reasons.map(sentenceOf).join(' '),
      ]),
    );
    lastLine = rows.at(-1)?.line ?? lastLine;
  }
}

function isRemark(heading: string): boolean {
  return remarkColumns.some((remark) => remark === heading.toLowerCase());
}

function sentenceOf({ column, reason }: CellRemark): string {
  return column === '' ? reason : `${column}: ${reason}`;
}
