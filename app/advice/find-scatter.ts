import { cramerVonMises } from '~/reliability/cramer-von-mises';
import { dispersion } from '~/reliability/dispersion';
import type { History } from '~/reliability/history';
import type { PooledExposure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { visitRate, type VisitedPosition } from '~/reliability/visit-rate';
import { halfResolutionAfter, isFailureOf, isWatched, watchedEvents } from '~/reliability/watched-events';
import { weibullFitCheck } from '~/reliability/weibull-fit-check';
import { calendarDay } from './calendar-day';
import { findSameCause, watchedDays } from './find-same-cause';
import type { Place } from './class-evidence';
import type { ScatterFindings } from './scatter-findings';

export interface ScatterInput {
  readonly positions: readonly Position[];
  readonly placeOf: (positionId: string) => Place;
  /** Moments of planned visits that renewed nothing (inspection, service, test); renewals are known anyway. */
  readonly visitsOf: (positionId: string) => readonly number[];
  readonly groups: ScatterFindings['groups'];
  readonly pooled: PooledExposure;
  /** Histories on the asset clock and the slope fitted to them, null where there is none. */
  readonly asset: { readonly histories: readonly History[]; readonly slope: number | null };
  /** The same on the life clock. */
  readonly life: { readonly histories: readonly History[]; readonly shape: number | null };
}

const namingLevel = 0.05;
const mostNamed = 5;
const visitSpanDays = 30;
const visitConfidence = 0.9;

/** Measures how a class's failures lie about. Pure. */
export function findScatter(input: ScatterInput): ScatterFindings {
  const { positions, placeOf, visitsOf, groups, pooled, asset, life } = input;
  const trendCheck = asset.slope === null ? null : cramerVonMises(asset.histories, asset.slope);
  const lifeCheck = life.shape === null ? null : weibullFitCheck(life.histories, life.shape);
  return {
    perPosition: perPosition(positions, placeOf),
    sameCause: findSameCause(positions, pooled, placeOf),
    afterVisit: afterVisit(positions, visitsOf),
    dates: dates(positions, pooled),
    fit: {
      trend: trendCheck && {
        failures: trendCheck.failures,
        statistic: trendCheck.statistic,
        criticalAtFivePercent: trendCheck.criticalAtFivePercent,
        rejected: trendCheck.rejected,
      },
      life: lifeCheck && { ...lifeCheck },
    },
    groups: { ...groups },
  };
}

function perPosition(
  positions: readonly Position[],
  placeOf: ScatterInput['placeOf'],
): ScatterFindings['perPosition'] {
  const watched = positions.filter(isWatched);
  const counts = watched.map((position) => {
    const { usage, watchFrom, watchTo } = position;
    const failures = failuresOf(position).length;
    const exposure = usage.at(watchTo) - usage.at(watchFrom);
    // A clock that stood still and a failure all the same: it ran for some part of the record's resolution.
    return {
      failures,
      exposure: exposure > 0 || failures === 0 ? exposure : halfResolutionAfter(position, watchFrom),
    };
  });
  const result = dispersion(counts, namingLevel);
  return (
    result && {
      positions: result.positions,
      failures: result.failures,
      statistic: result.statistic,
      degreesOfFreedom: result.degreesOfFreedom,
      p: result.p,
      standingOut: result.stickingOut.length,
      worst: result.stickingOut.slice(0, mostNamed).map(({ index, failures, expected }) => {
        const positionId = watched[index]!.id;
        return { positionId, tag: placeOf(positionId).tag, failures, expected };
      }),
    }
  );
}

function failuresOf(position: Position): number[] {
  return watchedEvents(position)
    .filter((event) => isFailureOf(event, undefined))
    .map(({ at }) => at);
}

function afterVisit(
  positions: readonly Position[],
  visitsOf: ScatterInput['visitsOf'],
): ScatterFindings['afterVisit'] {
  let visits = 0;
  const visited = positions.filter(isWatched).map((position): VisitedPosition => {
    const { watchFrom: from, watchTo: to, events } = position;
    const renewals = events.filter(({ kind }) => kind === 'planned-renewal').map(({ at }) => at);
    // From the day after on: what fails on the day itself was found by the visit as likely as caused by it.
    const all = [...renewals, ...visitsOf(position.id)]
      .map((at) => Math.floor(at) + 1)
      .filter((at) => at > from - visitSpanDays && at < to);
    visits += all.length;
    return { from, to, visits: all, failures: failuresOf(position) };
  });
  if (visits === 0) return null;
  const { after, otherwise, comparison } = visitRate(visited, visitSpanDays, visitConfidence);
  return {
    visits,
    after: { ...after },
    otherwise: { ...otherwise },
    ratio: comparison?.ratio ?? null,
    low: comparison?.lower ?? 0,
    high: comparison?.upper ?? null,
  };
}

/** Only records without a time of day can share their moment by chance; a day is as likely as another then. */
function dates(positions: readonly Position[], { failures }: PooledExposure): ScatterFindings['dates'] {
  const moments = new Map<number, number>();
  for (const { at } of failures) moments.set(at, (moments.get(at) ?? 0) + 1);
  const withoutTime = failures.filter(({ at }) => Number.isInteger(at)).length;
  const days = Math.max(1, watchedDays(positions.filter(isWatched)));
  return {
    failures: failures.length,
    onFirstOfMonth: failures.filter(({ at }) => calendarDay(at).day === 1).length,
    tied: [...moments.values()].reduce((sum, count) => sum + (count > 1 ? count : 0), 0),
    tiedByChance: withoutTime === 0 ? 0 : withoutTime * (1 - (1 - 1 / days) ** (withoutTime - 1)),
    withoutTime,
  };
}
