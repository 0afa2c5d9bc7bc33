import type { Database } from '../../db/connection';
import { constraintOf } from './constraint';
import { openStates } from './schedule-change';
import { move, type Decision, type Moved } from './schedule-changes-move.server';
import type { LockedChange } from './schedule-changes.server';
import { putIntoEffect, takeOutOfEffect } from './schedule-effect.server';

type Refused =
  /** Nobody decides on what they put forward, and nobody speaks for another in what is theirs to do. */
  | { outcome: 'own-change' | 'not-yours' }
  | { outcome: 'marked' | 'schedule-changed' }
  /** The schedule has been changed again since it took effect. */
  | { outcome: 'taken-over' }
  /** Another change of the class waits. */
  | { outcome: 'another-open' };
export type DecideResult = Moved | Refused;

/** Approves a change: it takes effect on a day, today or later. */
export function approveChange(db: Database, decision: Decision & { day: string }): Promise<DecideResult> {
  return move<Refused>(db, decision, { from: ['put-forward'], step: 'approved' }, async (trx, change) => {
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
  return move<Refused>(db, decision, { from: openStates, step: 'declined' }, async (trx, change) => {
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
  return move<Refused>(db, decision, { from: ['put-forward'], step: 'asked-back' }, async (trx, change) => {
    if (change.putForwardById === decision.personId) return { outcome: 'own-change' };
    await trx('schedule_changes').where('id', change.id).update({ state: 'asked-back' });
    return { outcome: 'done' };
  });
}

/** Answers what was asked back: the change waits for a decision again. */
export function answerChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move<Refused>(db, decision, { from: ['asked-back'], step: 'answered' }, async (trx, change) => {
    await trx('schedule_changes').where('id', change.id).update({ state: 'put-forward' });
    return { outcome: 'done' };
  });
}

/** Withdraws a change that waits: only who put it forward may. */
export function withdrawChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move<Refused>(db, decision, { from: openStates, step: 'withdrawn' }, async (trx, change) => {
    if (change.putForwardById !== decision.personId) return { outcome: 'not-yours' };
    await trx('schedule_changes').where('id', change.id).update({ state: 'withdrawn' });
    return { outcome: 'done' };
  });
}

/** Puts a withdrawn change forward again: the undo of withdrawing. */
export async function reopenChange(db: Database, decision: Decision): Promise<DecideResult> {
  try {
    return await move<Refused>(
      db,
      decision,
      { from: ['withdrawn'], step: 'put-forward' },
      async (trx, change) => {
        if (change.putForwardById !== decision.personId) return { outcome: 'not-yours' };
        await trx('schedule_changes').where('id', change.id).update({ state: 'put-forward' });
        return { outcome: 'done' };
      },
    );
  } catch (error) {
    if (constraintOf(error) !== 'schedule_changes_one_open') throw error;
    return { outcome: 'another-open' };
  }
}

/** The way back: the schedule goes on from today as it was before. */
export function takeBackChange(db: Database, decision: Decision): Promise<DecideResult> {
  return move<Refused>(db, decision, { from: ['approved'], step: 'taken-back' }, async (trx, change) => {
    const { today, personId } = decision;
    const { newTaskId, takesEffectOn } = change;
    if (takesEffectOn === null) throw new Error(`change ${change.id} is approved without a day`);
    const effect = await takeOutOfEffect(
      trx,
      { ...(await inEffect(trx, change)), newTaskId, takesEffectOn },
      { day: today, personId },
    );
    if (effect.outcome !== 'done') return effect;
    await trx('schedule_changes')
      .where('id', change.id)
      .update({ state: 'taken-back', taken_back_on: today });
    return { outcome: 'done' };
  });
}

async function inEffect(trx: Database, { id, classId, action, taskId, to }: LockedChange) {
  const assets = (await trx('schedule_change_assets').where('change_id', id).select('asset_id')) as {
    asset_id: string;
  }[];
  return { id, classId, action, taskId, to, assetIds: assets.map((row) => row.asset_id) };
}
