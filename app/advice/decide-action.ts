import { intervalStep, practicableInterval } from './practicable-interval';
import type { Action, Reason } from './proposal';
import type { ProposalFacts } from './proposal-facts';
import type { Change, PricedSchedule } from './schedule-findings';
import { smallChange, trialInterval } from './trial-interval';

/** What to do and which rule says so. */
export interface Decision {
  readonly action: Action;
  readonly reason: Reason;
  /** The interval afterwards; today's where nothing changes. */
  readonly to: number | null;
  /** The change that was weighed, also where it was found wanting. */
  readonly weighed: Change | null;
}

/** Below this share of the draws a change is too close to call, and none is proposed. */
export const sureEnough = 0.8;

/**
 * The rules, in order: what can hurt somebody is evidence only; what age does not explain needs a cause, not
 * a schedule; what is not known needs more evidence; then the verdict, and for wearing items the money.
 * No interval for the whole class lies beyond the supported age; only a trial on a part may, since finding
 * out is what it is for (age exploration, Nowlan & Heap 1978). The rules are Intervale's own.
 */
export function decideAction(facts: ProposalFacts): Decision {
  const { marks, verdict, trend } = facts;
  if (marks.statutory || marks.endangersPeople) return unchanged(facts, 'evidence-only', 'marked');
  if (trend === 'rising' && verdict !== 'wear-out')
    return unchanged(facts, 'look-for-cause', 'rising-not-by-age');
  if (trend === 'falling') return unchanged(facts, 'keep', 'falling');
  if (facts.modesDiffer) return unchanged(facts, 'gather', 'modes-differ');
  switch (verdict) {
    case 'undecided':
      return unchanged(facts, 'gather', 'undecided');
    case 'early-life':
      return unchanged(facts, 'look-for-cause', 'early-life');
    case 'memoryless':
      return forMemoryless(facts);
    case 'wear-out':
      return forWearOut(facts);
  }
}

function forMemoryless(facts: ProposalFacts): Decision {
  const { schedule, maskedAge, badPositions, clock } = facts;
  const today = schedule.current.interval;
  if (today === null) {
    return badPositions.length > 0
      ? unchanged(facts, 'look-for-cause', 'bad-positions')
      : unchanged(facts, 'keep', 'nothing-to-prevent');
  }
  const changes = schedule.kind === 'priced' ? schedule.changes : null;
  if (maskedAge === null) {
    return ifSure(facts, changes?.stop ?? null, { action: 'stop', reason: 'nothing-to-prevent', to: null });
  }
  const to = trialInterval(maskedAge, today, clock);
  if (to === null) return unchanged(facts, 'keep', 'past-what-was-seen');
  return ifSure(facts, changes?.trial ?? null, { action: 'trial', reason: 'nothing-to-prevent', to });
}

function forWearOut(facts: ProposalFacts): Decision {
  const { schedule } = facts;
  if (schedule.kind === 'costs-missing') return unchanged(facts, 'gather', 'costs-missing');
  if (schedule.kind === 'no-fit') return unchanged(facts, 'gather', 'not-priceable');
  const { best, changes, current } = schedule;
  if (best.exact === null) return forCheapFailures(facts, schedule);
  if (changes.best === null) return unchanged(facts, 'gather', 'few-survivors');
  if (current.interval !== null) return forScheduledWearOut(facts, schedule, current.interval, best.exact);
  const start = { action: 'start', reason: 'schedule-pays', to: best.interval } as const;
  const decision = ifSure(facts, changes.best, start);
  return decision.action === 'keep' && best.beyondData ? { ...decision, reason: 'beyond-data' } : decision;
}

/** Running to failure is cheapest: a failure costs little more than a planned renewal. */
function forCheapFailures(facts: ProposalFacts, { current, changes }: PricedSchedule): Decision {
  if (current.interval === null) return unchanged(facts, 'keep', 'cheap-to-fail');
  if (facts.maskedAge === null) {
    return ifSure(facts, changes.stop, { action: 'stop', reason: 'cheap-to-fail', to: null });
  }
  if (changes.trial === null) return unchanged(facts, 'keep', 'past-what-was-seen');
  return ifSure(facts, changes.trial, {
    action: 'trial',
    reason: 'cheap-to-fail',
    to: changes.trial.interval,
  });
}

function forScheduledWearOut(
  facts: ProposalFacts,
  { best, changes }: PricedSchedule,
  today: number,
  exact: number,
): Decision {
  const { clock, maskedAge } = facts;
  const wanted = best.beyondData ? practicableInterval(exact, clock) : (best.interval ?? today);
  if (isNoChange(today, wanted, facts)) return unchanged(facts, 'keep', 'about-right', changes.best);
  if (wanted < today) {
    return ifSure(facts, changes.best, { action: 'shorten', reason: 'shorter-pays', to: best.interval });
  }
  if (maskedAge === null) {
    const longest = best.interval ?? today;
    if (longest < today || isNoChange(today, longest, facts)) return unchanged(facts, 'keep', 'beyond-data');
    return ifSure(facts, changes.best, { action: 'lengthen', reason: 'longer-pays', to: longest });
  }
  if (changes.trial === null) return unchanged(facts, 'keep', 'past-what-was-seen');
  const nearest = best.beyondData ? changes.bestBeyondData : changes.best;
  const chosen =
    nearest !== null && (nearest.interval ?? Infinity) < (changes.trial.interval ?? Infinity)
      ? nearest
      : changes.trial;
  return ifSure(facts, chosen, { action: 'trial', reason: 'longer-pays', to: chosen.interval });
}

function isNoChange(today: number, wanted: number, { clock }: ProposalFacts): boolean {
  const difference = Math.abs(wanted - today);
  return difference <= smallChange * today || difference < intervalStep(Math.max(today, wanted), clock);
}

/** A change stands where its saving is sure enough, or where no costs are given to weigh it by. */
function ifSure(facts: ProposalFacts, change: Change | null, decision: Omit<Decision, 'weighed'>): Decision {
  const pays = change === null || (change.share >= sureEnough && change.savingPerYear.value > 0);
  return pays ? { ...decision, weighed: change } : unchanged(facts, 'keep', 'too-close', change);
}

function unchanged(
  { schedule }: ProposalFacts,
  action: Action,
  reason: Reason,
  weighed: Change | null = null,
): Decision {
  return { action, reason, to: schedule.current.interval, weighed };
}
