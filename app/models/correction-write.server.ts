import type { Database } from '../../db/connection';
import { changedParts, type CorrectableFields } from './record-correction';

/** A failure to be written: from which state to which, and who voided it when, where it does not count afterwards. */
export interface RecordWrite {
  readonly id: string;
  readonly version: number;
  readonly before: CorrectableFields;
  readonly after: CorrectableFields;
  readonly voided?: { readonly at: string; readonly by: string | null };
}

const columnOf: Record<keyof CorrectableFields, string> = {
  failedOn: 'failed_on = target."failedOn"',
  failedAt: 'failed_at = target."failedAt"',
  modeId: 'mode_id = target."modeId"',
  effect: 'effect = target.effect',
  outsideCause: 'outside_cause = target."outsideCause"',
  itemFittedOn: 'item_fitted_on = target."itemFittedOn"',
  itemAge: 'item_age = target."itemAge"',
  voidReason:
    'void_reason = target."voidReason", voided_at = target."voidedAt", voided_by = target."voidedBy"',
};

/**
 * Writes failures, all in one statement and only the parts that change: the database checks anew what is written, and what is
 * left alone need not pass. Call it in a transaction that holds the records.
 *
 * @throws where one of them has another version by now.
 */
export async function writeRecords(trx: Database, writes: readonly RecordWrite[], now: Date): Promise<void> {
  const parts = new Set(writes.flatMap(({ before, after }) => changedParts(before, after)));
  if (parts.size === 0) return;
  const targets = writes.map(({ id, version, after, voided }) => ({
    ...after,
    id,
    version,
    voidedAt: voided?.at ?? null,
    voidedBy: voided?.by ?? null,
  }));
  const { rowCount } = await trx.raw<{ rowCount: number }>(
    `update failures f
        set ${[...parts].map((part) => columnOf[part]).join(', ')}, version = f.version + 1, updated_at = :now
       from jsonb_to_recordset(:targets::jsonb) as target (
         id uuid, version integer, "failedOn" date, "failedAt" timestamptz, "modeId" uuid, effect text, "outsideCause" text,
         "itemFittedOn" date, "itemAge" numeric, "voidReason" text, "voidedAt" timestamptz, "voidedBy" uuid)
      where f.id = target.id and f.version = target.version`,
    { now, targets: JSON.stringify(targets) },
  );
  if (rowCount !== writes.length) throw new Error('a failure to be corrected was changed meanwhile');
}
