import { z } from 'zod';
import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { importHeaderSchema, type ImportHeader } from './import-header';
import { readingLock } from './import-staging.server';
import type { CellRemark, ImportKind, RowStatus } from './import-types';

export { applyImport, applyModes, type ApplyMode, type ApplyResult } from './import-apply.server';
export { importMaxBytes } from './import-file.server';
export { rejectedCsv } from './import-rejected.server';
export { beginImport, stageImport, type BegunImport, type StageInput } from './import-staging.server';

export type ImportState = 'reading' | 'previewed' | 'applied' | 'discarded' | 'failed';

/** One uploaded file and what became of it. */
export interface ImportSummary {
  readonly id: string;
  readonly kind: ImportKind;
  readonly fileName: string;
  readonly fileBytes: number;
  /** A file whose reading stopped because its process died counts as `failed`. */
  readonly state: ImportState;
  /** Why it failed, as a sentence. */
  readonly problem: string | null;
  readonly header: ImportHeader | null;
  readonly counts: Readonly<Record<RowStatus, number>>;
  readonly createdByName: string;
  readonly createdAt: Date;
  readonly appliedAt: Date | null;
}

export interface ImportRow {
  readonly line: number;
  readonly status: RowStatus;
  /** As they stand in the file, by its own headings. */
  readonly cells: Readonly<Record<string, string>>;
  /** Why it is rejected, or what it changes. */
  readonly remarks: readonly CellRemark[];
}

const stalled =
  'The reading stopped before its end, because the program did. Nothing was written. Upload the file again.';

interface StoredRow {
  id: string;
  kind: ImportKind;
  file_name: string;
  file_size: number;
  state: ImportState;
  problem: string | null;
  header: unknown;
  new_rows: number;
  changed_rows: number;
  unchanged_rows: number;
  rejected_rows: number;
  created_by_name: string;
  created_at: Date;
  applied_at: Date | null;
  unattended: boolean | null;
}

/** One page of imports, the latest first; `page` starts at 1. */
export async function listImports(
  db: Database,
  { page, perPage }: { page: number; perPage: number },
): Promise<{ imports: ImportSummary[]; total: number }> {
  const rows = await importsQuery(db)
    .orderBy([
      { column: 'imports.created_at', order: 'desc' },
      { column: 'imports.id', order: 'desc' },
    ])
    .limit(perPage)
    .offset((page - 1) * perPage);
  const [counted] = await db('imports').count<{ count: number }[]>('*');
  return { imports: rows.map(summaryOf), total: Number(counted?.count ?? 0) };
}

/** One import; undefined when there is none with this id. */
export async function findImport(db: Database, importId: string): Promise<ImportSummary | undefined> {
  if (!z.guid().safeParse(importId).success) return undefined;
  const row = await importsQuery(db).where('imports.id', importId).first();
  return row && summaryOf(row);
}

/** One page of an import's rows of one status, in the order of the file; `page` starts at 1. */
export async function listImportRows(
  db: Database,
  { importId, status, page, perPage }: { importId: string; status: RowStatus; page: number; perPage: number },
): Promise<ImportRow[]> {
  return db('import_rows')
    .where({ import_id: importId, status })
    .orderBy('line')
    .limit(perPage)
    .offset((page - 1) * perPage)
    .select<ImportRow[]>('line', 'status', 'cells', { remarks: 'reasons' });
}

/**
 * Puts an import aside without writing anything. Its rejected rows are kept, the others go.
 *
 * @returns whether it was there to discard; false when it has been applied or discarded meanwhile.
 */
export async function discardImport(
  db: Database,
  { importId, personId }: { importId: string; personId: string },
): Promise<boolean> {
  return db.transaction(async (trx) => {
    const discarded = await trx('imports')
      .where({ id: importId, state: 'previewed' })
      .update({ state: 'discarded' });
    if (discarded === 0) return false;
    await trx('import_rows').where('import_id', importId).whereNot('status', 'rejected').delete();
    await writeAudit(trx, { personId, action: 'discard', subject: 'import', subjectId: importId });
    return true;
  });
}

function importsQuery(db: Database) {
  return db('imports')
    .join('people', 'people.id', 'imports.created_by')
    .select<StoredRow[]>(
      'imports.*',
      { created_by_name: 'people.name' },
      // Whoever reads a file holds a lock on it, and loses it with its life.
      db.raw(
        `case when state = 'reading'
              then pg_try_advisory_xact_lock_shared(${readingLock.replace('?', 'imports.id')}) end as unattended`,
      ),
    );
}

function summaryOf(row: StoredRow): ImportSummary {
  const died = row.unattended === true;
  return {
    id: row.id,
    kind: row.kind,
    fileName: row.file_name,
    fileBytes: row.file_size,
    state: died ? 'failed' : row.state,
    problem: died ? stalled : row.problem,
    header: row.header === null ? null : importHeaderSchema.parse(row.header),
    counts: {
      new: row.new_rows,
      changed: row.changed_rows,
      unchanged: row.unchanged_rows,
      rejected: row.rejected_rows,
    },
    createdByName: row.created_by_name,
    createdAt: row.created_at,
    appliedAt: row.applied_at,
  };
}
