import { stringify } from 'csv-stringify';
import { Readable } from 'node:stream';
import { guardFormula } from '~/models/import-formula-guard';

export interface CsvColumn<Row> {
  readonly header: string;
  /** Text as it stands, numbers in plain decimals, null for an empty cell. */
  readonly cell: (row: Row) => string | number | null;
}

/**
 * A list as a CSV file to download: rows go out as they come, so that any number of them takes no more memory, and
 * stop being fetched when the reader goes away. Cells that a spreadsheet would take for formulas are made harmless.
 */
export function csvDownload<Row>(
  name: string,
  columns: readonly CsvColumn<Row>[],
  rows: AsyncIterable<Row>,
): Response {
  const lines = Readable.from(rows).map((row: Row) => columns.map(({ cell }) => textOf(cell(row))));
  const encoder = stringify({
    header: true,
    columns: columns.map(({ header }) => header),
    record_delimiter: 'windows',
  });
  lines.on('error', (error) => encoder.destroy(error));
  encoder.on('close', () => lines.destroy());
  return new Response(Readable.toWeb(lines.pipe(encoder)) as ReadableStream, {
    headers: {
      'Content-Type': 'text/csv; charset=utf-8',
      'Content-Disposition': attachment(name),
      'X-Content-Type-Options': 'nosniff',
    },
  });
}

function textOf(value: string | number | null): string {
  if (value === null) return '';
  // A negative number is one, whatever a spreadsheet takes its sign for.
  return typeof value === 'number' ? String(value) : guardFormula(value);
}

/** An attachment of that name, for browsers old and new (RFC 6266). */
export function attachment(name: string): string {
  const plain = name.replace(/[^\w.-]+/g, '-');
  const encoded = encodeURIComponent(Buffer.from(name).toString()).replace(
    /['()*]/g,
    (sign) => `%${sign.charCodeAt(0).toString(16)}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
