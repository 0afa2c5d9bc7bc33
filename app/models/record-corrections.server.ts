import { z } from 'zod';
import type { Database } from '../../db/connection';
import { writeAudit, writeAudits } from './audit.server';
import {
  canBeSaved,
  correctableColumns,
  correctableRowSchema,
  fieldsOf,
  planCorrection,
  refuseChange,
  type CorrectedRecord,
  type CorrectionPlan,
  type Present,
  type SeenRecord,
} from './correction-plan.server';
import { writeRecords, type RecordWrite } from './correction-write.server';
import {
  changedParts,
  correctableFieldsSchema,
  correctionSchema,
  type CorrectableFields,
  type Correction,
} from './record-correction';

export type CorrectResult =
  | { outcome: 'done'; corrected: number }
  /** Nothing was written: some records cannot be corrected so, or were changed by others meanwhile. */
  | { outcome: 'not-as-seen'; plan: CorrectionPlan }
  /** It was made and taken back before; nothing was written. */
  | { outcome: 'taken-back' };

interface CorrectInput extends Present {
  /** Made by the client: the same correction sent twice is made once. */
  correctionId: string;
  classId: string;
  seen: readonly SeenRecord[];
  correction: Correction;
  personId: string;
}

/** The records of a plan that can be corrected, as they are to be written. */
export function writesOf(
  records: readonly CorrectedRecord[],
  { personId, now }: { personId: string; now: Date },
): RecordWrite[] {
  const voided = { at: now.toISOString(), by: personId };
  return records
    .filter(({ refusal }) => refusal === null)
    .map((record) => (record.after.voidReason === null ? record : { ...record, voided }));
}

/** Corrects some failures, all or none, with before and after in the audit trail. */
export async function correctRecords(db: Database, input: CorrectInput): Promise<CorrectResult> {
  const { correctionId, classId, seen, correction, personId, now, today } = input;
  return db.transaction(async (trx) => {
    // A form sent twice at the same moment: the second waits, and finds it made.
    await trx.raw(`select pg_advisory_xact_lock(hashtextextended(?, 0))`, [correctionId]);
    const made = await findMade(trx, correctionId);
    if (made !== null) return made;

    const plan = await planCorrection(trx, classId, { seen, correction, lock: true }, { now, today });
    if (!canBeSaved(plan, correction)) return { outcome: 'not-as-seen', plan };

    const along = correction.kind === 'merge-mode' ? await mergeMode(trx, correction, personId) : [];
    await trx('record_corrections').insert({
      id: correctionId,
      class_id: classId,
      person_id: personId,
      at: now,
      correction: JSON.stringify({ ...correction, along }),
    });
    await keepBefore(trx, correctionId, plan.records);
    await writeRecords(trx, writesOf(plan.records, { personId, now }), now);
    await writeAudits(
      trx,
      plan.records.map(({ id, before, after }) => ({
        personId,
        action: auditAction(correction),
        subject: 'failure',
        subjectId: id,
        ...difference(before, after),
      })),
    );
    return { outcome: 'done', corrected: plan.records.length };
  });
}

async function findMade(trx: Database, correctionId: string): Promise<CorrectResult | null> {
  const { rows } = await trx.raw<{ rows: { takenBackAt: Date | null; corrected: number }[] }>(
    `select c.taken_back_at as "takenBackAt",
            (select count(*) from record_correction_items i where i.correction_id = c.id) as corrected
       from record_corrections c where c.id = ?`,
    [correctionId],
  );
  const [made] = rows;
  if (made === undefined) return null;
  return made.takenBackAt === null
    ? { outcome: 'done', corrected: made.corrected }
    : { outcome: 'taken-back' };
}

/** Keeps what the records were, to take the correction back by; call it before they are written. */
async function keepBefore(
  trx: Database,
  correctionId: string,
  records: readonly CorrectedRecord[],
): Promise<void> {
  await trx.raw(
    `insert into record_correction_items (correction_id, failure_id, version, before)
     select :correctionId, f.id, f.version + 1, jsonb_build_object(
              'failedOn', f.failed_on, 'failedAt', f.failed_at, 'modeId', f.mode_id, 'effect', f.effect,
              'outsideCause', f.outside_cause, 'itemFittedOn', f.item_fitted_on, 'itemAge', f.item_age,
              'voidReason', f.void_reason, 'voidedAt', f.voided_at, 'voidedBy', f.voided_by)
       from failures f where f.id = any(:ids::uuid[])`,
    { correctionId, ids: records.map(({ id }) => id) },
  );
}

const keptSchema = correctableFieldsSchema.extend({
  failedAt: z
    .string()
    .transform((at) => new Date(at).toISOString())
    .nullable(),
  voidedAt: z.string().nullable(),
  voidedBy: z.string().nullable(),
});

function auditAction({ kind }: Correction): 'void' | 'restore' | 'correct' {
  return kind === 'void' || kind === 'restore' ? kind : 'correct';
}

/** Only what is different: the trail is read by people. */
function difference(before: CorrectableFields, after: CorrectableFields) {
  const parts = changedParts(before, after);
  const only = (fields: CorrectableFields) => Object.fromEntries(parts.map((part) => [part, fields[part]]));
  return { before: only(before), after: only(after) };
}

/** @returns the modes merged into the one that goes before: they go along. */
async function mergeMode(
  trx: Database,
  { from, modeId: into }: Extract<Correction, { kind: 'merge-mode' }>,
  personId: string,
): Promise<string[]> {
  await trx('failure_modes').where('id', from).update({ merged_into: into });
  const along = (await trx('failure_modes')
    .where('merged_into', from)
    .update({ merged_into: into })
    .returning('id')) as { id: string }[];
  await writeAudit(trx, {
    personId,
    action: 'merge',
    subject: 'failure-mode',
    subjectId: from,
    before: { mergedInto: null },
    after: { mergedInto: into },
  });
  return along.map(({ id }) => id);
}

const madeSchema = correctionSchema.and(z.object({ along: z.array(z.uuid()).default([]) }));

async function unmergeMode(
  trx: Database,
  { from, into, along }: { from: string; into: string; along: readonly string[] },
  personId: string,
): Promise<void> {
  await trx('failure_modes').where('id', from).update({ merged_into: null });
  await trx('failure_modes')
    .whereIn('id', [...along])
    .update({ merged_into: from });
  await writeAudit(trx, {
    personId,
    action: 'unmerge',
    subject: 'failure-mode',
    subjectId: from,
    before: { mergedInto: into },
    after: { mergedInto: null },
  });
}

export type TakeBackResult =
  | { outcome: 'done'; records: number }
  | { outcome: 'no-such-correction' }
  /** Somebody changed so many of the records since: nothing was taken back. */
  | { outcome: 'changed-since'; records: number }
  /** So many of the records do not fit their assets any more as they were before: nothing was taken back. */
  | { outcome: 'refused'; records: number };

interface TakeBackInput extends Present {
  correctionId: string;
  classId: string;
  personId: string;
}

/** Takes a whole correction back, as long as nobody has changed its records since. */
export async function takeCorrectionBack(db: Database, input: TakeBackInput): Promise<TakeBackResult> {
  const { correctionId, classId, personId, now, today } = input;
  return db.transaction(async (trx) => {
    const held = (await trx('record_corrections')
      .where({ id: correctionId, class_id: classId })
      .forUpdate()
      .first('correction', 'taken_back_at')) as
      { correction: unknown; taken_back_at: Date | null } | undefined;
    if (held === undefined) return { outcome: 'no-such-correction' };

    const items = await lockItems(trx, correctionId);
    if (held.taken_back_at !== null) return { outcome: 'done', records: items.length };
    const changed = items.filter(({ row, left }) => row.version !== left).length;
    if (changed > 0) return { outcome: 'changed-since', records: changed };
    const refused = items.filter(({ row, kept }) => refuseChange(row, kept, { now, today }) !== null).length;
    if (refused > 0) return { outcome: 'refused', records: refused };

    await writeRecords(trx, items.map(writeBack), now);
    await writeAudits(
      trx,
      items.map(({ row, kept }) => ({
        personId,
        action: 'take-back',
        subject: 'failure',
        subjectId: row.id,
        ...difference(fieldsOf(row), kept),
      })),
    );
    const made = madeSchema.parse(held.correction);
    if (made.kind === 'merge-mode') {
      await unmergeMode(trx, { from: made.from, into: made.modeId, along: made.along }, personId);
    }
    await trx('record_corrections').where('id', correctionId).update({ taken_back_at: now });
    return { outcome: 'done', records: items.length };
  });
}

interface KeptItem {
  row: z.output<typeof correctableRowSchema>;
  /** The version the correction left. */
  left: number;
  kept: z.output<typeof keptSchema>;
}

async function lockItems(trx: Database, correctionId: string): Promise<KeptItem[]> {
  await trx.raw(
    `select a.id from assets a where a.id in (
       select f.asset_id from record_correction_items i join failures f on f.id = i.failure_id where i.correction_id = ?
     ) order by a.id for share`,
    [correctionId],
  );
  const { rows } = await trx.raw<{ rows: { left: number; kept: unknown }[] }>(
    `select ${correctableColumns}, i.version as left, i.before as kept
       from record_correction_items i join failures f on f.id = i.failure_id
       join assets a on a.id = f.asset_id join sites s on s.id = a.site_id
       join asset_classes c on c.id = f.class_id
      where i.correction_id = ? order by f.id for update of f`,
    [correctionId],
  );
  return rows.map((row) => ({
    row: correctableRowSchema.parse(row),
    left: row.left,
    kept: keptSchema.parse(row.kept),
  }));
}

function writeBack({ row, kept }: KeptItem): RecordWrite {
  const { voidedAt, voidedBy, ...after } = kept;
  const write = { id: row.id, version: row.version, before: fieldsOf(row), after };
  return voidedAt === null ? write : { ...write, voided: { at: voidedAt, by: voidedBy } };
}

/** A correction that was made in a class. */
export interface MadeCorrection {
  readonly id: string;
  readonly correction: Correction;
  readonly personName: string;
  readonly at: Date;
  readonly records: number;
  readonly takenBackAt: Date | null;
}

/** The last corrections made in a class, the latest first. */
export async function listCorrections(
  db: Database,
  classId: string,
  most: number,
): Promise<MadeCorrection[]> {
  const { rows } = await db.raw<{ rows: (Omit<MadeCorrection, 'correction'> & { correction: unknown })[] }>(
    `select c.id, c.correction, p.name as "personName", c.at, c.taken_back_at as "takenBackAt",
            (select count(*) from record_correction_items i where i.correction_id = c.id) as records
       from record_corrections c join people p on p.id = c.person_id
      where c.class_id = ? order by c.at desc limit ?`,
    [classId, most],
  );
  return rows.map((row) => ({ ...row, correction: correctionSchema.parse(row.correction) }));
}
