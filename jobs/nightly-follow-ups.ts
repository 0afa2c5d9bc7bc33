import type { ClassEvidence } from '~/advice/class-evidence';
import { aimOf, followUp, followUpPeriod, type FollowUp } from '~/advice/follow-up';
import type { FollowedChange } from '~/models/change-follow-ups.server';
import { dayNumber } from '~/models/day-number';
import type { Position } from '~/reliability/position';

/** A change is compared with the last three years before it at most: what is older may have been another world. */
const mostDaysBefore = 3 * 365.25;

/**
 * What became of a class's changes in effect, from its records: against the time before, or for a trial against the
 * rest of the class over the same time; until a later change took over. A change with no running time yet is left out.
 */
export function followUpsOf(
  evidence: ClassEvidence,
  changes: readonly FollowedChange[],
): { changeId: string; followUp: FollowUp }[] {
  return changes.flatMap((change) => {
    const result = followUpOf(evidence, change);
    return result === null ? [] : [{ changeId: change.id, followUp: result }];
  });
}

function followUpOf(evidence: ClassEvidence, change: FollowedChange): FollowUp | null {
  const { now, costs, clockUnitsAYear } = evidence;
  const positions = [...evidence.positions, ...evidence.rateOnlyPositions];
  const start = dayNumber(change.takesEffectOn);
  const isTrial = change.action === 'trial';
  const taking = isTrial ? positions.filter((position) => takesPart(position, change.assetIds)) : positions;
  const rest = isTrial ? positions.filter((position) => !taking.includes(position)) : [];
  const before = change.previousEffectOn === null ? -Infinity : dayNumber(change.previousEffectOn);
  const next = change.nextEffectOn === null ? Infinity : dayNumber(change.nextEffectOn);
  const end = Math.min(now, next);
  return followUp({
    aim: aimOf(change),
    isOver: next < now,
    against: isTrial ? 'rest' : 'before',
    base: isTrial
      ? followUpPeriod(rest, start, end)
      : followUpPeriod(positions, Math.max(before, start - mostDaysBefore, watchBegan(positions)), start),
    after: followUpPeriod(taking, start, end),
    costs: {
      plannedMinor: costs.groupPlannedMinor ?? costs.plannedMinor,
      failureMinor: costs.failureMinor,
    },
    unitsAYear: clockUnitsAYear,
  });
}

/** Items of a quantity asset are positions of their own, named after it. */
function takesPart({ id }: Position, assetIds: readonly string[]): boolean {
  return assetIds.includes(id.split('#')[0] ?? id);
}

const watchBegan = (positions: readonly Position[]): number =>
  positions.reduce((first, { watchFrom }) => Math.min(first, watchFrom), Infinity);
