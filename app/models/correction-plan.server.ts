import { z } from 'zod';
import type { Database } from '../../db/connection';
import { effects, outsideCauses } from './failure';
import { refuseDates, type FailureRefusal } from './failure-refusals';
import { asksForDates, corrected, type CorrectableFields, type Correction } from './record-correction';
import { listLastChanges, type RecordChange } from './last-change.server';

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

/** Somebody changed a record after the person saw it, or logged one that belongs with those chosen. */
export interface ChangedMeanwhile {
  readonly id: string;
  readonly tag: string;
  readonly failedOn: string;
  /** What the audit trail says of it last. */
  readonly change: RecordChange | null;
}

/** What a correction comes to, record by record; those it leaves as they are stand in neither list. */
export interface CorrectionPlan {
  readonly records: CorrectedRecord[];
  readonly unchanged: number;
  readonly meanwhile: ChangedMeanwhile[];
  /** A mode it names is not on the class's list (any more): nothing can be corrected so. */
  readonly modeGone: boolean;
}

/** Whether a plan can be carried out as it is; merging two modes can, whether or not they have failures. */
export function canBeSaved(plan: CorrectionPlan, correction: Correction): boolean {
  return (
    !plan.modeGone &&
    plan.meanwhile.length === 0 &&
    plan.records.every(({ refusal }) => refusal === null) &&
    (plan.records.length > 0 || correction.kind === 'merge-mode')
  );
}

export interface Present {
  now: Date;
  /** The day it is, in the organisation's zone. */
  today: string;
}

/** Reads one of the rows that `correctableColumns` gives. */
export const correctableRowSchema = z.object({
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
type CorrectableRow = z.output<typeof correctableRowSchema>;

export const correctableColumns = `f.id, f.version, a.tag, s.name as "siteName", c.item_singular as "itemSingular",
  a.in_service_on as "inServiceOn", a.watched_until as "watchedUntil", a.retired_on as "retiredOn",
  f.failed_on as "failedOn", f.failed_at as "failedAt", f.mode_id as "modeId", f.effect,
  f.outside_cause as "outsideCause", f.item_fitted_on as "itemFittedOn", f.item_age as "itemAge",
  f.void_reason as "voidReason"`;

export function fieldsOf(row: CorrectableRow): CorrectableFields {
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

/** Why a failure cannot go from one state to another, or null. */
export function refuseChange(
  row: CorrectableRow,
  after: CorrectableFields,
  present: Present,
): FailureRefusal | null {
  if (!asksForDates(fieldsOf(row), after)) return null;
  const failedAt = after.failedAt === null ? null : new Date(after.failedAt);
  return refuseDates(row, { ...after, failedAt }, present);
}

/**
 * What a correction would do to some failures of a class. Ids that are no failure of it are passed over. Merging modes takes
 * all failures of the mode that goes: one that was not seen was logged meanwhile.
 *
 * @param lock whether records, assets and modes are to stay as they are until the transaction ends.
 */
export async function planCorrection(
  db: Database,
  classId: string,
  { seen, correction, lock = false }: { seen: readonly SeenRecord[]; correction: Correction; lock?: boolean },
  present: Present,
): Promise<CorrectionPlan> {
  const ids = seen.map(({ id }) => id);
  // Whoever logs a failure takes its asset first, then its mode: the same order keeps the two from blocking each other.
  if (lock) await lockAssetsOf(db, classId, ids);
  const modeGone = !(await hasModes(db, classId, { correction, lock }));
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select ${correctableColumns}
       from failures f join assets a on a.id = f.asset_id join sites s on s.id = a.site_id
       join asset_classes c on c.id = f.class_id
      where f.class_id = :classId and (f.id = any(:ids::uuid[]) or f.mode_id = :goes)
      order by f.failed_on desc, a.tag, f.id ${lock ? 'for update of f' : ''}`,
    { classId, ids, goes: correction.kind === 'merge-mode' ? correction.from : null },
  );
  const versions = new Map(seen.map(({ id, version }) => [id, version]));
  const records: CorrectedRecord[] = [];
  const moved: CorrectableRow[] = [];
  let unchanged = 0;
  for (const row of rows.map((one) => correctableRowSchema.parse(one))) {
    const before = fieldsOf(row);
    const after = corrected(before, correction);
    if (versions.get(row.id) !== row.version) moved.push(row);
    else if (after === before) unchanged += 1;
    else {
      const { id, tag, siteName, itemSingular, version } = row;
      const refusal = refuseChange(row, after, present);
      records.push({ id, tag, siteName, itemSingular, version, before, after, refusal });
    }
  }
  return { records, unchanged, meanwhile: await whoMoved(db, moved), modeGone };
}

async function lockAssetsOf(trx: Database, classId: string, failureIds: readonly string[]): Promise<void> {
  await trx.raw(
    `select id from assets
      where id in (select asset_id from failures where class_id = :classId and id = any(:ids::uuid[]))
      order by id for share`,
    { classId, ids: [...failureIds] },
  );
}

async function hasModes(
  db: Database,
  classId: string,
  { correction, lock }: { correction: Correction; lock: boolean },
): Promise<boolean> {
  const named =
    correction.kind === 'merge-mode'
      ? [correction.from, correction.modeId]
      : correction.kind === 'mode' && correction.modeId !== null
        ? [correction.modeId]
        : [];
  if (named.length === 0) return true;
  const strength = correction.kind === 'merge-mode' ? 'for update' : 'for share';
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select id from failure_modes
      where class_id = :classId and id = any(:named::uuid[]) and merged_into is null
      order by id ${lock ? strength : ''}`,
    { classId, named },
  );
  return rows.length === named.length;
}

async function whoMoved(db: Database, moved: readonly CorrectableRow[]): Promise<ChangedMeanwhile[]> {
  if (moved.length === 0) return [];
  const last = await listLastChanges(db, {
    subject: 'failure',
    subjectIds: moved.map(({ id }) => id),
  });
  return moved.map(({ id, tag, failedOn }) => ({ id, tag, failedOn, change: last.get(id) ?? null }));
}
