import { createReadStream } from 'node:fs';
import { pipeline, type Readable } from 'node:stream';
import { CsvError, parse } from 'csv-parse';
import type { SpooledFile } from './import-file.server';
import { ImportFileError } from './import-types';

export const delimiters = [',', ';', '\t'] as const;
export type Delimiter = (typeof delimiters)[number];

export interface CsvRecord {
  /** Line of the file, from 1, on which the record starts. */
  readonly line: number;
  readonly cells: readonly string[];
}

export interface CsvFile {
  readonly delimiter: Delimiter;
  readonly headings: readonly string[];
  /** The records below the headings, each once; rows with nothing in them are passed over. */
  readonly records: AsyncGenerator<CsvRecord>;
}

/** Longest record taken, in characters: far above any real one, so that a quote never closed is noticed. */
const recordMaxLength = 100_000;
const headMaxLength = 20_000;

/** Characters of Windows-1252 at 0x80 to 0x9F, where Latin-1 has controls that no text holds (WHATWG Encoding). */
const windows1252 = '€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008dŽ\u008f\u0090‘’“”•–—˜™š›œ\u009džŸ';

/**
 * Opens a CSV file: byte-order mark, comma, semicolon or tab, any line ends, quotes as RFC 4180 has them.
 * Records are read as they are asked for, so that memory does not grow with the file.
 *
 * @throws ImportFileError when there is no first row, and from `records` when a quote is never closed.
 */
export async function openCsv(file: SpooledFile): Promise<CsvFile> {
  const delimiter = await findDelimiter(file);
  const records = readRecords(file, delimiter);
  const first = await records.next();
  if (first.done) throw new ImportFileError('The file has no row at all.');
  return { delimiter, headings: first.value.cells.map((heading) => heading.trim()), records };
}

async function findDelimiter(file: SpooledFile): Promise<Delimiter> {
  let head = '';
  for await (const text of decodeFile(file)) {
    head += text;
    if (head.trimStart().includes('\n') || head.length > headMaxLength) break;
  }
  const [line = ''] = head
    .trimStart()
    .replace(/"[^"]*"/g, '')
    .split('\n');
  const count = (delimiter: string) => line.split(delimiter).length;
  return delimiters.reduce((best, each) => (count(each) > count(best) ? each : best));
}

async function* readRecords(file: SpooledFile, delimiter: Delimiter): AsyncGenerator<CsvRecord> {
  let lastLine = 0;
  const parser = parse({
    delimiter,
    // Noted as records are parsed: an error overtakes those still on their way to the loop below.
    on_record: (record: string[], { lines }) => {
      lastLine = lines;
      return record;
    },
    info: true,
    raw: true,
    record_delimiter: '\n',
    // A bare quote inside a cell (a 5" pipe) is a character like any other.
    relax_quotes: true,
    // A row of another length is that row's fault alone, and is told from its number of cells.
    relax_column_count: true,
    skip_empty_lines: true,
    max_record_size: recordMaxLength,
  });
  const source: Readable = createReadStream(file.path);
  // Errors on the way come out of the loop below.
  pipeline(
    source,
    (bytes: AsyncIterable<Buffer>) => decode(bytes, file.encoding),
    parser,
    () => undefined,
  );
  try {
    for await (const each of parser) {
      const { record, raw, info } = each as { record: string[]; raw: string; info: { lines: number } };
      const breaks = (raw.trim().match(/\n/g) ?? []).length;
      if (record.every((cell) => cell.trim() === '')) continue;
      yield { line: info.lines - breaks, cells: record };
    }
  } catch (error) {
    if (!(error instanceof CsvError)) throw error;
    throw new ImportFileError(
      `The file cannot be read from line ${lastLine + 1} on: a quotation mark there is opened and never closed.`,
    );
  } finally {
    source.destroy();
  }
}

function decodeFile(file: SpooledFile): AsyncGenerator<string> {
  return decode(createReadStream(file.path), file.encoding);
}

/** Text of a file with every line end as a single newline and without a byte-order mark. */
async function* decode(
  bytes: AsyncIterable<Buffer>,
  encoding: SpooledFile['encoding'],
): AsyncGenerator<string> {
  const utf8 = new TextDecoder('utf-8');
  let endedWithReturn = false;
  for await (const chunk of bytes) {
    let text = encoding === 'utf-8' ? utf8.decode(chunk, { stream: true }) : decodeLatin1(chunk);
    if (endedWithReturn && text.startsWith('\n')) text = text.slice(1);
    if (text !== '') endedWithReturn = text.endsWith('\r');
    yield text.replace(/\r\n?/g, '\n');
  }
}

function decodeLatin1(chunk: Buffer): string {
  return chunk
    .toString('latin1')
    .replace(/[\u0080-\u009f]/g, (control) => windows1252.charAt(control.charCodeAt(0) - 0x80));
}
