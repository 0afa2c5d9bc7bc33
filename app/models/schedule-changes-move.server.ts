import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import type { ChangeState, ChangeStepKind } from './schedule-change';
import { lockChange, type LockedChange } from './schedule-changes.server';

export type Moved =
  | { outcome: 'done' }
  /** It is not in the state, or not at the version, that the person saw; somebody moved it on. */
  | { outcome: 'moved-on' };

export interface Decision {
  changeId: string;
  version: number;
  personId: string;
  words: string | null;
  now: Date;
  /** The day it is, in the organisation's zone. */
  today: string;
}

interface Step {
  /** States in which it can be done. */
  readonly from: readonly ChangeState[];
  readonly step: ChangeStepKind;
  /** What is kept as said; the person's own words unless given. */
  readonly words?: (before: LockedChange) => string;
}

/**
 * Does one thing with a change in a transaction of its own, if it still stands as the person saw it.
 *
 * @param act may refuse with an outcome of its own, having changed nothing.
 */
export function move<Refused extends { outcome: string }>(
  db: Database,
  decision: Decision,
  { from, step, words = () => decision.words ?? '' }: Step,
  act: (trx: Database, change: LockedChange) => Promise<{ outcome: 'done' } | Refused>,
): Promise<Moved | Refused> {
  const { changeId, version, personId, now } = decision;
  return db.transaction(async (trx): Promise<Moved | Refused> => {
    const before = await lockChange(trx, changeId);
    if (before?.version !== version || !from.includes(before.state)) return { outcome: 'moved-on' };
    const result = await act(trx, before);
    if (result.outcome !== 'done') return result;
    await trx('schedule_changes')
      .where('id', changeId)
      .update({ version: version + 1 });
    const said = words(before) || null;
    await addStep(trx, changeId, { step, words: said, personId, now });
    const after = await lockChange(trx, changeId);
    await writeAudit(trx, {
      personId,
      action: step,
      subject: 'schedule-change',
      subjectId: changeId,
      before: auditedOf(before),
      after: { ...(after && auditedOf(after)), words: said },
    });
    return result;
  });
}

function auditedOf({ state, action, from, to, reason, takesEffectOn, takenBackOn }: LockedChange) {
  return { state, action, from, to, reason, takesEffectOn, takenBackOn };
}

interface StepDone {
  step: ChangeStepKind;
  words: string | null;
  personId: string;
  now: Date;
}

/** Adds to what was said and done about a change. */
export async function addStep(
  trx: Database,
  changeId: string,
  { step, words, personId, now }: StepDone,
): Promise<void> {
  await trx('schedule_change_steps').insert({
    change_id: changeId,
    step,
    words,
    person_id: personId,
    at: now,
  });
}
