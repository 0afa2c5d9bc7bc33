import { randomUUID } from 'node:crypto';
import type { Readable } from 'node:stream';
import type { Database } from '../../db/connection';
import type { Cells } from './import-cells';
import { matchHeadings, type MatchedHeadings } from './import-columns';
import { openCsv, type CsvFile, type CsvRecord } from './import-csv.server';
import { spoolFile, type SpooledFile } from './import-file.server';
import { withFormat, type ImportFormat, type StagedRow } from './import-formats.server';
import { unguardFormula } from './import-formula-guard';
import type { ImportHeader } from './import-header';
import type { FileRow } from './import-row';
import { createSeenKeys, type SeenKeys } from './import-seen.server';
import { ImportFileError, type CellRemark, type ImportKind } from './import-types';
import { readOrganisation } from './organisation.server';

/** Rows judged and stored at a time. */
const batchSize = 1000;

export interface StageInput {
  readonly kind: ImportKind;
  readonly fileName: string;
  readonly stream: Readable | AsyncIterable<Uint8Array>;
  readonly personId: string;
  /** The day it is, in the organisation's zone. */
  readonly today: string;
}

/** An import that has begun: its id, and the end of its reading. */
export interface BegunImport {
  readonly importId: string;
  /** Settles when all rows are staged, or the import is marked as failed; never rejects for what is in the file. */
  readonly staged: Promise<void>;
}

/** The key of the lock that is held while an import is being read: a reader that died holds it no more. */
export const readingLock = "hashtextextended('intervale import ' || ?::text, 0)";

/**
 * Takes a file in and stages its rows for a look before anything is written.
 *
 * @returns the id of the import, which is then `previewed`, or `failed` with its problem.
 * @throws ImportFileError when the file is refused as a whole; nothing is stored then.
 */
export async function stageImport(db: Database, input: StageInput): Promise<string> {
  const { importId, staged } = await beginImport(db, input);
  await staged;
  return importId;
}

/**
 * As {@link stageImport}, but comes back once the file is here and its headings are understood; the rows
 * are staged meanwhile, and the import is in the state `reading` until that is done.
 *
 * @throws ImportFileError when the file is refused as a whole; nothing is stored then.
 */
export async function beginImport(db: Database, input: StageInput): Promise<BegunImport> {
  const file = await spoolFile(input.stream);
  try {
    const csv = await openCsv(file);
    const matched = matchHeadings(csv.headings, input.kind);
    const importId = randomUUID();
    return await new Promise<BegunImport>((resolve, reject) => {
      const onBegun = () => resolve({ importId, staged });
      const staged = stageRows(db, { importId, input, file, csv, matched, onBegun }).finally(file.remove);
      staged.catch(reject);
    });
  } catch (error) {
    await file.remove();
    throw error;
  }
}

interface Staging {
  readonly importId: string;
  readonly input: StageInput;
  readonly file: SpooledFile;
  readonly csv: CsvFile;
  readonly matched: MatchedHeadings;
  readonly onBegun: () => void;
}

async function stageRows(db: Database, staging: Staging): Promise<void> {
  const { importId, input, onBegun } = staging;
  const { timeZone } = await readOrganisation(db);
  let begun = false;
  try {
    // The transaction holds the reading lock and what has been seen of the file; rows are stored outside it,
    // so that the page can tell how far the reading is.
    await db.transaction(async (trx) => {
      await trx.raw(`select pg_advisory_xact_lock(${readingLock})`, [importId]);
      await storeImport(db, staging);
      begun = true;
      onBegun();
      const seen = await createSeenKeys(trx, importId);
      await withFormat(input.kind, { today: input.today, timeZone }, (format) =>
        stageBatches(db, trx, staging, { format, seen }),
      );
      await db('imports').where('id', importId).update({ state: 'previewed' });
    });
  } catch (error) {
    if (!begun) throw error;
    await markFailed(db, importId, error);
  }
}

async function storeImport(db: Database, { importId, input, file, csv, matched }: Staging): Promise<void> {
  const header: ImportHeader = {
    headings: [...csv.headings],
    delimiter: csv.delimiter,
    encoding: file.encoding,
    corrected: matched.corrected,
  };
  await db('imports').insert({
    id: importId,
    kind: input.kind,
    file_name: input.fileName.slice(-200),
    file_size: file.bytes,
    file_sha256: file.sha256,
    state: 'reading',
    header: JSON.stringify(header),
    created_by: input.personId,
  });
}

async function stageBatches<Target>(
  db: Database,
  trx: Database,
  { importId, csv, matched }: Staging,
  { format, seen }: { format: ImportFormat<Target>; seen: SeenKeys },
): Promise<void> {
  for await (const records of inBatches(csv.records)) {
    const rows = records.map((record) => takeApart(record, csv.headings, matched));
    const judged = await format.stage(
      trx,
      rows.map(({ line, cells, remarks }) => ({ line, cells, remarks })),
      seen,
    );
    await storeRows(db, importId, rows, judged);
  }
}

async function* inBatches(records: AsyncIterable<CsvRecord>): AsyncGenerator<CsvRecord[]> {
  let batch: CsvRecord[] = [];
  for await (const record of records) {
    batch.push(record);
    if (batch.length === batchSize) {
      yield batch;
      batch = [];
    }
  }
  if (batch.length > 0) yield batch;
}

interface OpenedRow extends FileRow {
  /** As they stand in the file, by its own headings. */
  readonly original: Cells;
}

function takeApart(record: CsvRecord, headings: readonly string[], matched: MatchedHeadings): OpenedRow {
  const original: Record<string, string> = {};
  const cells: Record<string, string> = {};
  const remarks: CellRemark[] = [];
  const surplus = record.cells.filter((cell, index) => cell !== '' && !headings[index]);
  if (surplus.length > 0) {
    remarks.push({
      column: '',
      value: surplus.join(' '),
      reason:
        'The row has more cells than there are headings: perhaps a text with a separator in it lacks its quotes.',
    });
  }
  headings.forEach((heading, index) => {
    const cell = record.cells[index] ?? '';
    const column = matched.columns[index];
    if (heading === '' || (column === null && matched.corrected)) return;
    original[heading] = matched.corrected ? unguardFormula(cell) : cell;
    if (column) cells[column] = original[heading];
  });
  return { line: record.line, original, cells, remarks };
}

async function storeRows(
  db: Database,
  importId: string,
  rows: readonly OpenedRow[],
  judged: readonly StagedRow[],
): Promise<void> {
  const stored = judged.map(({ line, status, remarks, row, occurrence = 1 }, index) => ({
    line,
    status,
    // A rejected row that has equals before it must come back as the one it is.
    cells:
      status === 'rejected' && occurrence > 1
        ? { ...rows[index]?.original, occurrence: String(occurrence) }
        : rows[index]?.original,
    parsed: row,
    reasons: remarks,
  }));
  const count = (status: string) => stored.filter((row) => row.status === status).length;
  await db.transaction(async (trx) => {
    await trx.raw(
      `insert into import_rows (import_id, line, status, cells, parsed, reasons)
       select ?, line, status, cells, nullif(parsed, 'null'), reasons
         from jsonb_to_recordset(?::jsonb) as row (line integer, status text, cells jsonb, parsed jsonb, reasons jsonb)`,
      [importId, JSON.stringify(stored)],
    );
    await trx('imports')
      .where('id', importId)
      .update({
        new_rows: trx.raw('new_rows + ?', [count('new')]),
        changed_rows: trx.raw('changed_rows + ?', [count('changed')]),
        unchanged_rows: trx.raw('unchanged_rows + ?', [count('unchanged')]),
        rejected_rows: trx.raw('rejected_rows + ?', [count('rejected')]),
      });
  });
}

async function markFailed(db: Database, importId: string, error: unknown): Promise<void> {
  const understood = error instanceof ImportFileError;
  if (!understood) console.error(`The import ${importId} could not be staged:`, error);
  const problem = understood
    ? error.message
    : 'Something went wrong here while the file was being read. Try again; if it happens again, tell your administrator.';
  await db.transaction(async (trx) => {
    await trx('import_rows').where('import_id', importId).delete();
    await trx('imports').where('id', importId).update({
      state: 'failed',
      problem,
      new_rows: 0,
      changed_rows: 0,
      unchanged_rows: 0,
      rejected_rows: 0,
    });
  });
}
