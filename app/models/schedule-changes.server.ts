import { z } from 'zod';
import { conclusionSchema } from '~/advice/conclusion';
import { findingsSchema } from '~/advice/findings';
import { followUpSchema } from '~/advice/follow-up';
import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';
import {
  changeActions,
  changeStates,
  openStates,
  type Change,
  type ChangeRow,
  type ChangeState,
  type ChangeStep,
  type ChangeTerms,
} from './schedule-change';
import { findRenewingTask, putIntoEffect, takeOutOfEffect } from './schedule-effect.server';

export interface ChangeListFilter {
  /** Waiting for somebody, waiting for a decision, in effect and followed, or past. */
  group?: ChangeGroup;
  classId?: string;
  /** Only of classes with an asset at this site. */
  siteId?: string;
  /** From 1. */
  page: number;
  pageSize: number;
}

export const changeGroups = ['open', 'to-decide', 'followed', 'past'] as const;
export type ChangeGroup = (typeof changeGroups)[number];

const statesOf: Record<ChangeGroup, readonly ChangeState[]> = {
  open: openStates,
  'to-decide': ['put-forward'],
  followed: ['approved'],
  past: ['declined', 'withdrawn', 'taken-back'],
};

const columns = `
  x.id, x.class_id as "classId", c.name as "className", c.item_plural as "itemPlural", c.clock,
  c.statutory or c.endangers_people as "isMarked", x.action, x.state, x.origin, x.reason,
  x.from_interval::float8 as "from", x.to_interval::float8 as "to",
  x.saving_per_year_minor as "savingValue", x.saving_low_minor as "savingLow", x.saving_high_minor as "savingHigh",
  x.saving_share as share, x.put_forward_by as "putForwardById", p.name as "putForwardByName",
  x.put_forward_at as "putForwardAt", d.name as "decidedByName", x.decided_at as "decidedAt",
  x.takes_effect_on as "takesEffectOn", x.taken_back_on as "takenBackOn", x.task_id as "taskId",
  x.new_task_id as "newTaskId", x.follow_up as "followUp", x.follow_up_as_of as "followUpAsOf", x.version,
  (select count(*) from schedule_change_assets a where a.change_id = x.id) as assets`;
const tables = `schedule_changes x join asset_classes c on c.id = x.class_id
  join people p on p.id = x.put_forward_by left join people d on d.id = x.decided_by`;

const rowSchema = z
  .object({
    id: z.string(),
    classId: z.string(),
    className: z.string(),
    itemPlural: z.string(),
    clock: z.enum(['calendar-days', 'operating-hours']),
    isMarked: z.boolean(),
    action: z.enum(changeActions),
    state: z.enum(changeStates),
    origin: z.enum(['proposal', 'by-hand']),
    reason: z.string(),
    from: z.number().nullable(),
    to: z.number().nullable(),
    savingValue: z.number().nullable(),
    savingLow: z.number().nullable(),
    savingHigh: z.number().nullable(),
    share: z.number().nullable(),
    putForwardById: z.string(),
    putForwardByName: z.string(),
    putForwardAt: z.date(),
    decidedByName: z.string().nullable(),
    decidedAt: z.date().nullable(),
    takesEffectOn: z.string().nullable(),
    takenBackOn: z.string().nullable(),
    taskId: z.string().nullable(),
    newTaskId: z.string().nullable(),
    followUp: followUpSchema.nullable(),
    followUpAsOf: z.string().nullable(),
    version: z.number(),
    assets: z.number(),
  })
  .transform(({ savingValue, savingLow, savingHigh, ...row }) => ({
    ...row,
    saving: savingValue === null ? null : { value: savingValue, low: savingLow ?? 0, high: savingHigh ?? 0 },
  }));

/** One page of the changes, those that wait first, then those in effect, the latest first within each. */
export async function listChanges(
  db: Database,
  { group, classId, siteId, page, pageSize }: ChangeListFilter,
): Promise<{ rows: ChangeRow[]; total: number }> {
  const conditions: string[] = [];
  if (group) conditions.push('x.state = any(:states)');
  if (classId) conditions.push('x.class_id = :classId');
  if (siteId)
    conditions.push('exists (select from assets s where s.class_id = x.class_id and s.site_id = :siteId)');
  const where = conditions.length === 0 ? '' : `where ${conditions.join(' and ')}`;
  const bindings = {
    ...(group ? { states: [...statesOf[group]] } : {}),
    ...(classId ? { classId } : {}),
    ...(siteId ? { siteId } : {}),
  };
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select ${columns} from ${tables} ${where}
      order by case when x.state in ('put-forward', 'asked-back') then 0 when x.state = 'approved' then 1 else 2 end,
               x.put_forward_at desc, x.id
      limit :limit offset :offset`,
    { ...bindings, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(
    `select count(*) as total from schedule_changes x ${where}`,
    bindings,
  );
  return { rows: rows.map((row) => rowSchema.parse(row)), total: counted.rows[0]?.total ?? 0 };
}

const evidenceSchema = z.object({ findings: findingsSchema, conclusion: conclusionSchema });

/** A change with its conversation and what it rested on; undefined where there is none. */
export async function findChange(db: Database, changeId: string): Promise<Change | undefined> {
  const { rows } = await db.raw<{ rows: { evidence: unknown; evidenceAsOf: string }[] }>(
    `select ${columns}, x.evidence, x.evidence_as_of as "evidenceAsOf" from ${tables} where x.id = ?`,
    [changeId],
  );
  const row = rows[0];
  if (row === undefined) return undefined;
  const steps = await db.raw<{ rows: ChangeStep[] }>(
    `select s.step, s.words, p.name as "personName", s.at
       from schedule_change_steps s join people p on p.id = s.person_id
      where s.change_id = ? order by s.id`,
    [changeId],
  );
  const part = await db.raw<{ rows: { id: string; tag: string; siteName: string }[] }>(
    `select a.id, a.tag, s.name as "siteName"
       from schedule_change_assets x join assets a on a.id = x.asset_id join sites s on s.id = a.site_id
      where x.change_id = ? order by a.tag`,
    [changeId],
  );
  const { evidence, evidenceAsOf, ...rest } = row;
  return {
    ...rowSchema.parse(rest),
    steps: steps.rows,
    part: part.rows,
    evidence: { asOf: evidenceAsOf, ...evidenceSchema.parse(evidence) },
  };
}

/** The change of a class that waits for somebody, if there is one. */
export async function findOpenChange(db: Database, classId: string): Promise<string | undefined> {
  const row = (await db('schedule_changes')
    .where('class_id', classId)
    .whereIn('state', [...openStates])
    .first('id')) as { id: string } | undefined;
  return row?.id;
}

export type PutForwardResult =
  | { outcome: 'stored' }
  | { outcome: 'already-stored' }
  /** Another change of the class waits for a decision. */
  | { outcome: 'another-open'; changeId: string }
  /** The class is not assessed, or is statutory or endangers people. */
  | { outcome: 'not-assessed' | 'marked' }
  /** The schedule in force is not the one the person saw. */
  | { outcome: 'schedule-changed' };

interface PutForwardInput {
  /** Made by the client: the same form sent twice puts one change forward. */
  id: string;
  classId: string;
  terms: ChangeTerms;
  origin: 'proposal' | 'by-hand';
  /** The renewing task the person saw in force; null for none. */
  taskId: string | null;
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
  const { id, classId, terms, origin, taskId, personId, now, today } = input;
  const stored = (await trx('schedule_changes').where('id', id).first('id', 'put_forward_by')) as
    { id: string } | undefined;
  if (stored) return { outcome: 'already-stored' };
  const { rows } = await trx.raw<{ rows: { isMarked: boolean; asOf: string | null }[] }>(
    `select c.statutory or c.endangers_people as "isMarked", a.as_of as "asOf"
       from asset_classes c left join assessments a on a.id = c.current_assessment_id where c.id = ?`,
    [classId],
  );
  const found = rows[0];
  if (found?.asOf == null) return { outcome: 'not-assessed' };
  if (found.isMarked) return { outcome: 'marked' };
  const standing = await findRenewingTask(trx, classId, today);
  if ((standing?.id ?? null) !== taskId) return { outcome: 'schedule-changed' };

  await trx.raw(
    `insert into schedule_changes (id, class_id, task_id, action, from_interval, to_interval, origin, reason,
                                   saving_per_year_minor, saving_low_minor, saving_high_minor, saving_share,
                                   evidence_as_of, evidence, put_forward_by, put_forward_at)
     select :id, c.id, :taskId, :action, :from, :to, :origin, :reason, :saving, :low, :high, :share,
            a.as_of, a.detail, :personId, :now
       from asset_classes c join assessments a on a.id = c.current_assessment_id where c.id = :classId`,
    { id, classId, taskId, origin, personId, now, ...columnsOf(terms) },
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

function columnsOf({ action, from, to, reason, saving, share }: ChangeTerms) {
  return {
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

export type DecideResult =
  | { outcome: 'done' }
  /** It is not in the state, or not at the version, that the person saw; somebody moved it on. */
  | { outcome: 'moved-on' }
  /** Nobody decides on what they put forward, and nobody speaks for another in what is theirs to do. */
  | { outcome: 'own-change' | 'not-yours' }
  | { outcome: 'marked' | 'schedule-changed' }
  | { outcome: 'another-open'; changeId: string };

export interface Decision {
  changeId: string;
  version: number;
  personId: string;
  words: string | null;
  now: Date;
  /** The day it is, in the organisation's zone. */
  today: string;
}

/** Approves a change: it takes effect on a day, today or later. */
export function approveChange(db: Database, decision: Decision & { day: string }): Promise<DecideResult> {
  return move(db, decision, { from: ['put-forward'], step: 'approved' }, async (trx, change) => {
    const { personId, now, day } = decision;
    if (change.putForwardById === personId) return { outcome: 'own-change' };
    if (change.isMarked) return { outcome: 'marked' };
    const effect = await putIntoEffect(trx, await inEffect(trx, change), { day, personId });
    if (effect.outcome !== 'done') return effect;
    await trx('schedule_changes').where('id', change.id).update({
      state: 'approved',
      decided_by: personId,
      decided_at: now,
      takes_effect_on: day,
      new_task_id: effect.newTaskId,
    });
    return { outcome: 'done' };
  });
}

/** Declines a change, with a reason. */
export function declineChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move(db, decision, { from: openStates, step: 'declined' }, async (trx, change) => {
    const { personId, now } = decision;
    if (change.putForwardById === personId) return { outcome: 'own-change' };
    await trx('schedule_changes')
      .where('id', change.id)
      .update({ state: 'declined', decided_by: personId, decided_at: now });
    return { outcome: 'done' };
  });
}

/** Asks back: the change waits for an answer. */
export function askBack(db: Database, decision: Decision): Promise<DecideResult> {
  return move(db, decision, { from: ['put-forward'], step: 'asked-back' }, async (trx, change) => {
    if (change.putForwardById === decision.personId) return { outcome: 'own-change' };
    await trx('schedule_changes').where('id', change.id).update({ state: 'asked-back' });
    return { outcome: 'done' };
  });
}

/** Answers what was asked back: the change waits for a decision again. */
export function answerChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move(db, decision, { from: ['asked-back'], step: 'answered' }, async (trx, change) => {
    await trx('schedule_changes').where('id', change.id).update({ state: 'put-forward' });
    return { outcome: 'done' };
  });
}

/** Withdraws a change that waits: only who put it forward may. */
export function withdrawChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move(db, decision, { from: openStates, step: 'withdrawn' }, async (trx, change) => {
    if (change.putForwardById !== decision.personId) return { outcome: 'not-yours' };
    await trx('schedule_changes').where('id', change.id).update({ state: 'withdrawn' });
    return { outcome: 'done' };
  });
}

/** Puts a withdrawn change forward again: the undo of withdrawing. */
export async function reopenChange(db: Database, decision: Decision): Promise<DecideResult> {
  try {
    return await move(db, decision, { from: ['withdrawn'], step: 'put-forward' }, async (trx, change) => {
      if (change.putForwardById !== decision.personId) return { outcome: 'not-yours' };
      await trx('schedule_changes').where('id', change.id).update({ state: 'put-forward' });
      return { outcome: 'done' };
    });
  } catch (error) {
    if (constraintOf(error) !== 'schedule_changes_one_open') throw error;
    const change = await findChange(db, decision.changeId);
    const changeId = change && (await findOpenChange(db, change.classId));
    if (changeId === undefined) throw error;
    return { outcome: 'another-open', changeId };
  }
}

/** The way back: the schedule goes on from today as it was before. */
export function takeBackChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move(db, decision, { from: ['approved'], step: 'taken-back' }, async (trx, change) => {
    const { today, personId } = decision;
    const { newTaskId, takesEffectOn } = change;
    if (takesEffectOn === null) throw new Error(`change ${change.id} is approved without a day`);
    await takeOutOfEffect(
      trx,
      { ...(await inEffect(trx, change)), newTaskId, takesEffectOn },
      { day: today, personId },
    );
    await trx('schedule_changes')
      .where('id', change.id)
      .update({ state: 'taken-back', taken_back_on: today });
    return { outcome: 'done' };
  });
}

type LockedChange = Pick<
  Change,
  | 'id'
  | 'classId'
  | 'action'
  | 'to'
  | 'taskId'
  | 'newTaskId'
  | 'putForwardById'
  | 'isMarked'
  | 'takesEffectOn'
>;

async function move(
  db: Database,
  decision: Decision,
  { from, step }: { from: readonly ChangeState[]; step: ChangeStep['step'] },
  act: (trx: Database, change: LockedChange) => Promise<DecideResult>,
): Promise<DecideResult> {
  const { changeId, version, personId, words, now } = decision;
  return db.transaction(async (trx) => {
    await trx('schedule_changes').where('id', changeId).forUpdate().select('id');
    const { rows } = await trx.raw<{ rows: unknown[] }>(`select ${columns} from ${tables} where x.id = ?`, [
      changeId,
    ]);
    const change = rows[0] === undefined ? undefined : rowSchema.parse(rows[0]);
    if (change?.version !== version || !from.includes(change.state)) return { outcome: 'moved-on' };
    const result = await act(trx, change);
    if (result.outcome !== 'done') return result;
    await trx('schedule_changes')
      .where('id', changeId)
      .update({ version: version + 1 });
    await addStep(trx, changeId, { step, words, personId, now });
    await writeAudit(trx, {
      personId,
      action: step,
      subject: 'schedule-change',
      subjectId: changeId,
      before: { state: change.state },
      after: { words },
    });
    return result;
  });
}

async function inEffect(trx: Database, { id, classId, action, taskId, to }: LockedChange) {
  const assets = (await trx('schedule_change_assets').where('change_id', id).select('asset_id')) as {
    asset_id: string;
  }[];
  return { id, classId, action, taskId, to, assetIds: assets.map((row) => row.asset_id) };
}

async function addStep(
  trx: Database,
  changeId: string,
  {
    step,
    words,
    personId,
    now,
  }: { step: ChangeStep['step']; words: string | null; personId: string; now: Date },
): Promise<void> {
  await trx('schedule_change_steps').insert({
    change_id: changeId,
    step,
    words,
    person_id: personId,
    at: now,
  });
}
