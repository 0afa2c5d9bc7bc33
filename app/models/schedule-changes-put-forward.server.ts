import { changeInWords } from '~/advice/change-words';
import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';
import { openStates, type ChangeTerms } from './schedule-change';
import { addStep, move, type Decision, type Moved } from './schedule-changes-move.server';
import { findOpenChange, type LockedChange } from './schedule-changes.server';
import { findRenewingTask, isInterval } from './schedule-effect.server';

export type PutForwardResult =
  | { outcome: 'stored' }
  | { outcome: 'already-stored' }
  /** Another change of the class waits for a decision. */
  | { outcome: 'another-open'; changeId: string }
  /** The class is not assessed, or is statutory or endangers people. */
  | { outcome: 'not-assessed' | 'marked' }
  /** The schedule in force is not the one the person saw. */
  | { outcome: 'schedule-changed' }
  /** The night has not priced the schedule that is in force today yet. */
  | { outcome: 'not-priced' }
  /** A change was approved already that begins on a later day. */
  | { outcome: 'ends-already'; endsOn: string };

/** What is put forward, and on what. */
interface Wanted {
  terms: ChangeTerms;
  origin: 'proposal' | 'by-hand';
  /** The renewing task the person saw in force; null for none. */
  taskId: string | null;
}

interface PutForwardInput extends Wanted {
  /** Made by the client: the same form sent twice puts one change forward. */
  id: string;
  classId: string;
  personId: string;
  now: Date;
  /** The day it is, in the organisation's zone. */
  today: string;
}

/** Puts a change forward with the evidence as it stands, frozen. */
export async function putForward(db: Database, input: PutForwardInput): Promise<PutForwardResult> {
  try {
    return await db.transaction((trx) => putForwardWithin(trx, input));
  } catch (error) {
    if (constraintOf(error) !== 'schedule_changes_one_open') throw error;
    const changeId = await findOpenChange(db, input.classId);
    if (changeId === undefined) throw error;
    return { outcome: 'another-open', changeId };
  }
}

async function putForwardWithin(trx: Database, input: PutForwardInput): Promise<PutForwardResult> {
  const { id, classId, terms, personId, now, today } = input;
  const stored = (await trx('schedule_changes').where('id', id).first('id')) as { id: string } | undefined;
  if (stored) return { outcome: 'already-stored' };
  const refused = await refuse(trx, classId, input, today);
  if (refused !== null) return refused;
  await trx.raw(
    `insert into schedule_changes (id, class_id, ${columnNames}, put_forward_by, put_forward_at)
     select :id, c.id, ${columnValues}, :personId, :now
       from asset_classes c join assessments a on a.id = c.current_assessment_id where c.id = :classId`,
    { id, classId, personId, now, ...columnsOf(input) },
  );
  await setPart(trx, id, terms);
  await addStep(trx, id, { step: 'put-forward', words: terms.reason, personId, now });
  await writeAudit(trx, {
    personId,
    action: 'put-forward',
    subject: 'schedule-change',
    subjectId: id,
    after: { classId, ...terms },
  });
  return { outcome: 'stored' };
}

type Refusal = Exclude<PutForwardResult, { outcome: 'stored' | 'already-stored' | 'another-open' }>;

interface StandingRow {
  isMarked: boolean;
  clock: 'calendar-days' | 'operating-hours';
  asOf: string | null;
}

/** Why a change of a class cannot be put forward as it stands in the database; null where it can. */
async function refuse(
  trx: Database,
  classId: string,
  { terms, taskId }: Wanted,
  today: string,
): Promise<Refusal | null> {
  const { rows } = await trx.raw<{ rows: StandingRow[] }>(
    `select c.statutory or c.endangers_people as "isMarked", c.clock, a.as_of as "asOf"
       from asset_classes c left join assessments a on a.id = c.current_assessment_id where c.id = ?`,
    [classId],
  );
  const found = rows[0];
  if (found?.asOf == null) return { outcome: 'not-assessed' };
  if (found.isMarked) return { outcome: 'marked' };
  const standing = await findRenewingTask(trx, classId, today);
  if ((standing?.id ?? null) !== taskId) return { outcome: 'schedule-changed' };
  if (!isInterval(standing, terms.from, found.clock)) return { outcome: 'not-priced' };
  return standing?.endsOn == null ? null : { outcome: 'ends-already', endsOn: standing.endsOn };
}

export type ReviseResult = Moved | Refusal | { outcome: 'not-yours' };

/**
 * Changes what is put forward, on the evidence as it stands by now: whoever put it forward may, until it is
 * decided. It then waits for a decision again.
 */
export function reviseChange(db: Database, decision: Decision & Wanted): Promise<ReviseResult> {
  const { changeId, terms, personId, today } = decision;
  const step = { from: openStates, step: 'revised', words: revisionWords(terms) } as const;
  return move<Refusal | { outcome: 'not-yours' }>(db, decision, step, async (trx, change) => {
    if (change.putForwardById !== personId) return { outcome: 'not-yours' };
    const refused = await refuse(trx, change.classId, decision, today);
    if (refused !== null) return refused;
    await trx.raw(
      `update schedule_changes x set (${columnNames}, state) = (
         select ${columnValues}, 'put-forward'
           from asset_classes c join assessments a on a.id = c.current_assessment_id where c.id = x.class_id)
        where x.id = :changeId`,
      { changeId, ...columnsOf(decision) },
    );
    await setPart(trx, changeId, terms);
    return { outcome: 'done' };
  });
}

/** What it was and what it is now, so that the conversation can be followed. */
const revisionWords = (terms: ChangeTerms) => (before: LockedChange) =>
  `Before: ${changeInWords(before, before.clock)}. Now: ${changeInWords(terms, before.clock)}.\n${terms.reason}`;

const columnNames = `task_id, action, from_interval, to_interval, origin, reason, saving_per_year_minor,
  saving_low_minor, saving_high_minor, saving_share, evidence_as_of, evidence`;
const columnValues = `:taskId::uuid, :action::text, :from::numeric, :to::numeric, :origin::text, :reason::text,
  :saving::bigint, :low::bigint, :high::bigint, :share::float8, a.as_of, a.detail`;

function columnsOf({ terms, origin, taskId }: Wanted) {
  const { action, from, to, reason, saving, share } = terms;
  return {
    taskId,
    origin,
    action,
    from,
    to,
    reason,
    saving: saving?.value ?? null,
    low: saving?.low ?? null,
    high: saving?.high ?? null,
    share,
  };
}

async function setPart(trx: Database, changeId: string, { assetIds }: ChangeTerms): Promise<void> {
  await trx('schedule_change_assets').where('change_id', changeId).delete();
  if (assetIds.length === 0) return;
  await trx('schedule_change_assets').insert(
    assetIds.map((assetId) => ({ change_id: changeId, asset_id: assetId })),
  );
}
