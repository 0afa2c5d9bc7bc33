import { z } from 'zod';
import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { effects, outsideCauses } from './failure';
import { refuseDates, type FailureRefusal } from './failure-refusals';
import { corrected, type CorrectableFields, type Correction } from './record-correction';

/** The most failures corrected in one go. */
export const mostCorrected = 5000;

/** A failure as the person saw it. */
export interface SeenRecord {
  readonly id: string;
  readonly version: number;
}

/** A failure before and after a correction, or why it cannot be corrected. */
export interface CorrectedRecord {
  readonly id: string;
  readonly tag: string;
  readonly siteName: string;
  readonly itemSingular: string;
  readonly version: number;
  readonly before: CorrectableFields;
  readonly after: CorrectableFields;
  readonly refusal: FailureRefusal | null;
}

/** Somebody changed a record after the person saw it. */
export interface ChangedMeanwhile {
  readonly id: string;
  readonly tag: string;
  readonly version: number;
  readonly personName: string | null;
  readonly at: Date | null;
}

/** What a correction comes to, record by record; those it leaves as they are stand in neither list. */
export interface CorrectionPlan {
  readonly records: CorrectedRecord[];
  readonly unchanged: number;
  readonly meanwhile: ChangedMeanwhile[];
}

const rowSchema = z.object({
  id: z.string(),
  version: z.number(),
  tag: z.string(),
  siteName: z.string(),
  itemSingular: z.string(),
  inServiceOn: z.string(),
  watchedUntil: z.string().nullable(),
  retiredOn: z.string().nullable(),
  failedOn: z.string(),
  failedAt: z.date().nullable(),
  modeId: z.string().nullable(),
  effect: z.enum(effects),
  outsideCause: z.enum(outsideCauses).nullable(),
  itemFittedOn: z.string().nullable(),
  itemAge: z.number().nullable(),
  voidReason: z.string().nullable(),
});

interface Present {
  now: Date;
  /** The day it is, in the organisation's zone. */
  today: string;
}

/**
 * What a correction would do to some failures of a class. Ids that are no failure of it are passed over.
 *
 * @param lock whether the records are to stay as they are until the transaction ends.
 */
export async function planCorrection(
  db: Database,
  classId: string,
  { seen, correction, lock = false }: { seen: readonly SeenRecord[]; correction: Correction; lock?: boolean },
  present: Present,
): Promise<CorrectionPlan> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select f.id, f.version, a.tag, s.name as "siteName", c.item_singular as "itemSingular",
            a.in_service_on as "inServiceOn", a.watched_until as "watchedUntil", a.retired_on as "retiredOn",
            f.failed_on as "failedOn", f.failed_at as "failedAt", f.mode_id as "modeId", f.effect,
            f.outside_cause as "outsideCause", f.item_fitted_on as "itemFittedOn", f.item_age as "itemAge",
            f.void_reason as "voidReason"
       from failures f join assets a on a.id = f.asset_id join sites s on s.id = a.site_id
       join asset_classes c on c.id = f.class_id
      where f.class_id = :classId and f.id = any(:ids::uuid[])
      order by f.failed_on desc, a.tag, f.id ${lock ? 'for update of f' : ''}`,
    { classId, ids: seen.map(({ id }) => id) },
  );
  const versions = new Map(seen.map(({ id, version }) => [id, version]));
  const records: CorrectedRecord[] = [];
  const moved: { id: string; tag: string; version: number }[] = [];
  let unchanged = 0;
  for (const row of rows.map((one) => rowSchema.parse(one))) {
    const before = fieldsOf(row);
    const after = corrected(before, correction);
    const { id, tag, siteName, itemSingular, version } = row;
    if (versions.get(id) !== version) moved.push({ id, tag, version });
    else if (after === before) unchanged += 1;
    else {
      const failedAt = after.failedAt === null ? null : new Date(after.failedAt);
      const refusal = after.voidReason === null ? refuseDates(row, { ...after, failedAt }, present) : null;
      records.push({ id, tag, siteName, itemSingular, version, before, after, refusal });
    }
  }
  return { records, unchanged, meanwhile: await whoMoved(db, moved) };
}

function fieldsOf(row: z.output<typeof rowSchema>): CorrectableFields {
  const { failedOn, failedAt, modeId, effect, outsideCause, itemFittedOn, itemAge, voidReason } = row;
  return {
    failedOn,
    failedAt: failedAt?.toISOString() ?? null,
    modeId,
    effect,
    outsideCause,
    itemFittedOn,
    itemAge,
    voidReason,
  };
}

async function whoMoved(
  db: Database,
  moved: readonly { id: string; tag: string; version: number }[],
): Promise<ChangedMeanwhile[]> {
  if (moved.length === 0) return [];
  const { rows } = await db.raw<{ rows: { id: string; personName: string | null; at: Date }[] }>(
    `select distinct on (e.subject_id) e.subject_id as id, p.name as "personName", e.at
       from audit_entries e left join people p on p.id = e.person_id
      where e.subject = 'failure' and e.subject_id = any(:ids)
      order by e.subject_id, e.id desc`,
    { ids: moved.map(({ id }) => id) },
  );
  const last = new Map(rows.map((row) => [row.id, row]));
  return moved.map((record) => ({
    ...record,
    personName: last.get(record.id)?.personName ?? null,
    at: last.get(record.id)?.at ?? null,
  }));
}

/** Writes the records of a plan that are not refused; call it in a transaction that holds them. */
export async function writeCorrected(
  trx: Database,
  records: readonly CorrectedRecord[],
  { personId, now }: { personId: string; now: Date },
): Promise<void> {
  for (const { id, version, before, after } of records) {
    const isVoided = after.voidReason !== null && before.voidReason === null;
    await trx('failures')
      .where({ id, version })
      .update({
        failed_on: after.failedOn,
        failed_at: after.failedAt,
        mode_id: after.modeId,
        effect: after.effect,
        outside_cause: after.outsideCause,
        item_fitted_on: after.itemFittedOn,
        item_age: after.itemAge,
        void_reason: after.voidReason,
        ...(after.voidReason === null ? { voided_at: null, voided_by: null } : {}),
        ...(isVoided ? { voided_at: now, voided_by: personId } : {}),
        version: version + 1,
        updated_at: now,
      });
  }
}

export type CorrectResult =
  | { outcome: 'done'; corrected: number }
  /** Nothing was written: some records cannot be corrected so, or were changed by others meanwhile. */
  | { outcome: 'not-as-seen'; plan: CorrectionPlan };

interface CorrectInput extends Present {
  /** Made by the client: the same correction sent twice is made once. */
  correctionId: string;
  classId: string;
  seen: readonly SeenRecord[];
  correction: Correction;
  personId: string;
}

/** Corrects some failures, all or none, with before and after in the audit trail. */
export async function correctRecords(db: Database, input: CorrectInput): Promise<CorrectResult> {
  const { correctionId, classId, seen, correction, personId, now, today } = input;
  return db.transaction(async (trx) => {
    const done = await trx('record_correction_items')
      .where('correction_id', correctionId)
      .count('* as n')
      .first();
    if (done !== undefined && Number(done.n) > 0) return { outcome: 'done', corrected: Number(done.n) };
    const plan = await planCorrection(trx, classId, { seen, correction, lock: true }, { now, today });
    if (plan.meanwhile.length > 0 || plan.records.some(({ refusal }) => refusal !== null)) {
      return { outcome: 'not-as-seen', plan };
    }
    await trx('record_corrections').insert({
      id: correctionId,
      class_id: classId,
      person_id: personId,
      at: now,
      correction: JSON.stringify(correction),
    });
    await writeCorrected(trx, plan.records, { personId, now });
    for (const { id, version, before, after } of plan.records) {
      await trx('record_correction_items').insert({
        correction_id: correctionId,
        failure_id: id,
        version: version + 1,
        before: JSON.stringify(before),
      });
      await writeAudit(trx, {
        personId,
        action: auditAction(correction),
        subject: 'failure',
        subjectId: id,
        ...difference(before, after),
      });
    }
    if (correction.kind === 'merge-mode') await setMerged(trx, correction.from, correction.modeId, personId);
    return { outcome: 'done', corrected: plan.records.length };
  });
}

function auditAction({ kind }: Correction): 'void' | 'restore' | 'correct' {
  return kind === 'void' || kind === 'restore' ? kind : 'correct';
}

/** Only what is different: the trail is read by people. */
function difference(before: CorrectableFields, after: CorrectableFields) {
  const names = (Object.keys(before) as (keyof CorrectableFields)[]).filter(
    (name) => before[name] !== after[name],
  );
  const only = (fields: CorrectableFields) => Object.fromEntries(names.map((name) => [name, fields[name]]));
  return { before: only(before), after: only(after) };
}

async function setMerged(trx: Database, from: string, into: string | null, personId: string): Promise<void> {
  await trx('failure_modes').where('id', from).update({ merged_into: into });
  // What was merged into it before goes along.
  if (into !== null) await trx('failure_modes').where('merged_into', from).update({ merged_into: into });
  await writeAudit(trx, {
    personId,
    action: into === null ? 'unmerge' : 'merge',
    subject: 'failure-mode',
    subjectId: from,
    after: { mergedInto: into },
  });
}

export type TakeBackResult =
  | { outcome: 'done'; records: number }
  | { outcome: 'no-such-correction' }
  /** Somebody changed so many of the records since: nothing was taken back. */
  | { outcome: 'changed-since'; records: number };

/** Takes a whole correction back, as long as nobody has changed its records since. */
export async function takeCorrectionBack(
  db: Database,
  input: { correctionId: string; classId: string; personId: string; now: Date },
): Promise<TakeBackResult> {
  const { correctionId, classId, personId, now } = input;
  return db.transaction(async (trx) => {
    const held = (await trx('record_corrections')
      .where({ id: correctionId, class_id: classId })
      .forUpdate()
      .first('correction', 'taken_back_at')) as
      { correction: Correction; taken_back_at: Date | null } | undefined;
    if (held === undefined) return { outcome: 'no-such-correction' };
    const { rows } = await trx.raw<{
      rows: { id: string; version: number; held: number; before: CorrectableFields }[];
    }>(
      `select i.failure_id as id, i.version, f.version as held, i.before
         from record_correction_items i join failures f on f.id = i.failure_id
        where i.correction_id = ? for update of f`,
      [correctionId],
    );
    if (held.taken_back_at !== null) return { outcome: 'done', records: rows.length };
    const changed = rows.filter(({ version, held: present }) => version !== present).length;
    if (changed > 0) return { outcome: 'changed-since', records: changed };
    for (const { id, version, before } of rows) {
      await takeRecordBack(trx, { id, version, before }, { personId, now });
    }
    if (held.correction.kind === 'merge-mode') await setMerged(trx, held.correction.from, null, personId);
    await trx('record_corrections').where('id', correctionId).update({ taken_back_at: now });
    return { outcome: 'done', records: rows.length };
  });
}

async function takeRecordBack(
  trx: Database,
  { id, version, before }: { id: string; version: number; before: CorrectableFields },
  { personId, now }: { personId: string; now: Date },
): Promise<void> {
  await trx('failures')
    .where({ id, version })
    .update({
      failed_on: before.failedOn,
      failed_at: before.failedAt,
      mode_id: before.modeId,
      effect: before.effect,
      outside_cause: before.outsideCause,
      item_fitted_on: before.itemFittedOn,
      item_age: before.itemAge,
      void_reason: before.voidReason,
      voided_at: before.voidReason === null ? null : now,
      voided_by: before.voidReason === null ? null : personId,
      version: version + 1,
      updated_at: now,
    });
  await writeAudit(trx, { personId, action: 'take-back', subject: 'failure', subjectId: id, after: before });
}
