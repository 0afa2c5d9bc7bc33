import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { withFormat, type ImportFormat, type KeptRow } from './import-formats.server';
import type { JudgedRow } from './import-row';
import type { ImportKind } from './import-types';
import { readOrganisation } from './organisation.server';

export const applyModes = ['all-or-nothing', 'good-rows'] as const;
/** `all-or-nothing`: only if no row is rejected; `good-rows`: whatever is not rejected. */
export type ApplyMode = (typeof applyModes)[number];

export interface ApplyInput {
  readonly importId: string;
  readonly personId: string;
  readonly mode: ApplyMode;
  /** The day it is, in the organisation's zone. */
  readonly today: string;
  readonly now?: Date;
}

export type ApplyResult =
  | {
      readonly outcome: 'applied';
      readonly newRows: number;
      readonly changedRows: number;
      readonly rejectedRows: number;
    }
  | { readonly outcome: 'already-applied' }
  /** Rows are rejected, perhaps only now, and all or nothing was asked for: nothing is written. */
  | { readonly outcome: 'refused'; readonly rejectedRows: number }
  /** It is still being read, or was discarded, or could not be read. */
  | { readonly outcome: 'not-ready' };

const batchSize = 1000;

interface StoredImport {
  readonly kind: ImportKind;
  readonly state: string;
  readonly file_name: string;
}

/**
 * Writes what an import found new or changed, in one transaction, once however often it is asked to.
 *
 * Every row is judged again against what is held at this moment: one that no longer fits is rejected, with
 * its reason, as if it had been so in the preview. Imports are applied one after the other.
 */
export async function applyImport(db: Database, input: ApplyInput): Promise<ApplyResult> {
  return db.transaction(async (trx) => {
    await trx.raw(`select pg_advisory_xact_lock(hashtextextended('intervale imports are applied', 0))`);
    const stored = await trx<StoredImport>('imports')
      .where('id', input.importId)
      .forUpdate()
      .first('kind', 'state', 'file_name');
    if (stored?.state === 'applied') return { outcome: 'already-applied' };
    if (stored?.state !== 'previewed') return { outcome: 'not-ready' };
    const { timeZone } = await readOrganisation(trx);
    return withFormat(stored.kind, { today: input.today, timeZone }, (format) =>
      applyRows(trx, input, stored, format),
    );
  });
}

async function applyRows<Target>(
  trx: Database,
  input: ApplyInput,
  stored: StoredImport,
  format: ImportFormat<Target>,
): Promise<ApplyResult> {
  const { importId, personId, mode, now = new Date() } = input;
  if (mode === 'all-or-nothing') {
    await judgeAgain(trx, importId, format);
    const { rejected } = await countRows(trx, importId);
    if (rejected > 0) return { outcome: 'refused', rejectedRows: rejected };
  }
  await judgeAgain(trx, importId, format, (targets) =>
    format.write(trx, targets, { importId, personId, now }),
  );
  const counts = await countRows(trx, importId);
  await trx('imports').where('id', importId).update({ state: 'applied', applied_at: now });
  await writeAudit(trx, {
    personId,
    action: 'apply',
    subject: 'import',
    subjectId: importId,
    after: { kind: stored.kind, fileName: stored.file_name, mode, ...counts },
  });
  return {
    outcome: 'applied',
    newRows: counts.new,
    changedRows: counts.changed,
    rejectedRows: counts.rejected,
  };
}

async function judgeAgain<Target>(
  trx: Database,
  importId: string,
  format: ImportFormat<Target>,
  write?: (targets: readonly Target[]) => Promise<void>,
): Promise<void> {
  let lastLine = 0;
  for (;;) {
    const rows = await trx('import_rows')
      .where('import_id', importId)
      .whereIn('status', ['new', 'changed'])
      .where('line', '>', lastLine)
      .orderBy('line')
      .limit(batchSize)
      .select<(KeptRow & { status: string })[]>('line', 'parsed', 'status');
    const last = rows.at(-1);
    if (last === undefined) return;
    lastLine = last.line;
    const judged = await format.judge(trx, rows);
    await storeVerdicts(
      trx,
      importId,
      judged.filter(({ status }, index) => status !== rows[index]?.status),
    );
    const targets = judged.flatMap(({ target }) => target ?? []);
    if (write && targets.length > 0) await write(targets);
  }
}

async function storeVerdicts<Target>(
  trx: Database,
  importId: string,
  differing: readonly JudgedRow<unknown, Target>[],
): Promise<void> {
  if (differing.length === 0) return;
  const verdicts = differing.map(({ line, status, remarks }) => ({ line, status, reasons: remarks }));
  await trx.raw(
    `update import_rows
        set status = verdict.status, reasons = verdict.reasons,
            parsed = case when verdict.status <> 'rejected' then parsed end
       from jsonb_to_recordset(?::jsonb) as verdict (line integer, status text, reasons jsonb)
      where import_id = ? and import_rows.line = verdict.line`,
    [JSON.stringify(verdicts), importId],
  );
}

/** Counts the rows of an import by status, and keeps the counts with it. */
async function countRows(
  trx: Database,
  importId: string,
): Promise<Record<'new' | 'changed' | 'unchanged' | 'rejected', number>> {
  const { rows } = await trx.raw<{ rows: { status: string; count: number }[] }>(
    'select status, count(*) from import_rows where import_id = ? group by status',
    [importId],
  );
  const of = (status: string) => rows.find((row) => row.status === status)?.count ?? 0;
  const counts = {
    new: of('new'),
    changed: of('changed'),
    unchanged: of('unchanged'),
    rejected: of('rejected'),
  };
  await trx('imports').where('id', importId).update({
    new_rows: counts.new,
    changed_rows: counts.changed,
    unchanged_rows: counts.unchanged,
    rejected_rows: counts.rejected,
  });
  return counts;
}
