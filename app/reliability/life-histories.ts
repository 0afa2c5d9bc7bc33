import type { History } from './history';
import { lifeChain, type Life, type LifeEnd } from './life-chain';
import type { Position } from './position';
import { halfResolutionAfter, isFailureOf } from './watched-events';

/** The history of one life on the life clock. */
export interface LifeHistory extends History {
  readonly positionId: string;
  /** What ended it; a failure of another mode that renewed the item counts as another renewal. */
  readonly endedBy: LifeEnd;
}

export interface LifeHistories {
  /** One a life of known age that was watched while its clock ran; time is clock units since it was fitted. */
  readonly histories: readonly LifeHistory[];
  readonly lives: number;
  readonly livesEndedByFailure: number;
  readonly livesEndedByPlannedRenewal: number;
  /** Ages in clock units at which planned renewals ended lives, in the order of the positions. */
  readonly plannedRenewalAges: readonly number[];
  /** Lives left out because nothing tells when the item was fitted, with what was left out along. */
  readonly livesLeftOut: number;
  readonly failuresLeftOut: number;
  readonly exposureLeftOut: number;
  /** Positions with such a life. */
  readonly positionsLeftOut: number;
  /** Lives that only the record of a failure or renewal could date. */
  readonly datedByRecord: number;
  /** Fitted-on dates that contradict the other records; those were followed. */
  readonly conflictingDates: number;
  /** Failures at age 0 at the resolution of the record, put half a resolution later. */
  readonly zeroLives: number;
}

/**
 * Histories on the life clock: time is usage since the item was fitted. A life already under way when the
 * watch opened enters late if its fitting is known, and is left out and counted if not. Lives during which
 * the clock stood still and nothing failed say nothing and vanish.
 *
 * @param options.mode only failures of this mode count; a failure of another mode that renewed the item
 *   censors the life, one that was patched does nothing. All modes unless given.
 */
export function lifeHistories(
  positions: readonly Position[],
  { mode }: { mode?: string } = {},
): LifeHistories {
  const histories: LifeHistory[] = [];
  const plannedRenewalAges: number[] = [];
  let livesLeftOut = 0;
  let failuresLeftOut = 0;
  let exposureLeftOut = 0;
  let positionsLeftOut = 0;
  let datedByRecord = 0;
  let conflictingDates = 0;
  let zeroLives = 0;

  for (const position of positions) {
    const chain = lifeChain(position);
    conflictingDates += chain.conflictingDates;
    if (chain.lives.some(({ fittedAt }) => fittedAt === null)) positionsLeftOut += 1;
    for (const life of chain.lives) {
      if (life.fittedAt === null) {
        livesLeftOut += 1;
        failuresLeftOut += life.failures.filter((event) => isFailureOf(event, mode)).length;
        exposureLeftOut += position.usage.at(life.to) - position.usage.at(life.from);
        continue;
      }
      const { history, zeroes } = lifeHistory(position, life, life.fittedAt, mode);
      if (history === null) continue;
      histories.push(history);
      zeroLives += zeroes;
      if (life.datedByRecord) datedByRecord += 1;
      if (history.endedBy === 'planned-renewal') plannedRenewalAges.push(history.exit);
    }
  }
  return {
    histories,
    lives: histories.length,
    livesEndedByFailure: histories.filter(({ endedBy }) => endedBy === 'failure').length,
    livesEndedByPlannedRenewal: plannedRenewalAges.length,
    plannedRenewalAges,
    livesLeftOut,
    failuresLeftOut,
    exposureLeftOut,
    positionsLeftOut,
    datedByRecord,
    conflictingDates,
    zeroLives,
  };
}

function lifeHistory(
  position: Position,
  life: Life,
  fittedAt: number,
  mode: string | undefined,
): { history: LifeHistory | null; zeroes: number } {
  const { usage } = position;
  const zero = usage.at(fittedAt);
  const entry = usage.at(life.from) - zero;
  let zeroes = 0;
  const failures = life.failures
    .filter((event) => isFailureOf(event, mode))
    .map(({ at }) => {
      const age = usage.at(at) - zero;
      if (age > entry) return age;
      if (entry === 0) zeroes += 1;
      return entry + halfResolutionAfter(position, at);
    })
    .sort((a, b) => a - b);
  const exit = Math.max(usage.at(life.to) - zero, failures.at(-1) ?? 0);
  if (!(exit > entry)) return { history: null, zeroes: 0 };
  return { history: { positionId: position.id, endedBy: endOf(life, mode), entry, exit, failures }, zeroes };
}

function endOf({ endedBy, failures }: Life, mode: string | undefined): LifeEnd {
  const last = failures.at(-1);
  if (endedBy !== 'failure' || last === undefined) return endedBy;
  return isFailureOf(last, mode) ? 'failure' : 'other-renewal';
}
