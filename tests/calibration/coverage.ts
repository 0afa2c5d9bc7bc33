import { forecast } from '~/advice/forecast';
import { estimateLife } from '~/advice/life-estimates';
import { summariseLives } from '~/advice/life-summary';
import { priceSchedule } from '~/advice/price-schedule';
import { ageReplacementCostRate } from '~/reliability/age-replacement';
import { assetHistories } from '~/reliability/asset-histories';
import { meanTimeInterval } from '~/reliability/exponential';
import { countFailures, totalExposure } from '~/reliability/history';
import { lifeHistories } from '~/reliability/life-histories';
import { piecewiseHazard } from '~/reliability/piecewise-hazard';
import type { Position } from '~/reliability/position';
import { fitPowerLaw } from '~/reliability/power-law';
import { weibullB10, weibullCumulativeHazard, weibullMeanLife, type Weibull } from '~/reliability/weibull';
import type { Random } from '../support/seeded-random';
import { simulateClass } from '../support/simulate-class';
import { shareOf, type Share } from './share';

/** Intervals as they stand on a screen; `saving` is the middle 80 %, all others are 90 %. */
export const intervals = [
  'shape',
  'slope',
  'mean-time',
  'mean-life',
  'tenth-gone',
  'hazard-band',
  'forecast',
  'saving',
] as const;
export type IntervalName = (typeof intervals)[number];

export interface CoverageRow extends Share {
  readonly interval: IntervalName;
  readonly shape: number;
  /** Failures expected in a class. */
  readonly failures: number;
}

const scale = 900;
const watchedDays = 1096;
const daysAYear = 365;
/** With fewer cases a share says nothing. */
const fewestToShow = 100;
const costs = { planned: 10_000, failure: 100_000 };

/** How often each interval holds the truth, for classes of one shape with about so many failures. */
export function coverage(random: Random, shape: number, failures: number, runs: number): CoverageRow[] {
  const truth = { shape, scale };
  const positions = Math.max(2, Math.round((failures * weibullMeanLife(truth)) / watchedDays));
  const held = new Map<IntervalName, boolean[]>(intervals.map((name) => [name, []]));
  const note = (name: IntervalName, value: number, low: number | null, high: number | null) =>
    held.get(name)!.push((low ?? 0) <= value && value <= (high ?? Infinity));

  for (let run = 0; run < runs; run += 1) {
    const whole = simulateClass(random, { shape, scale, positions, watchedDays: watchedDays + daysAYear });
    const seen = whole.map((position) => cutAt(position, watchedDays));
    const life = lifeHistories(seen);
    const asset = assetHistories(seen);
    const fit = fitPowerLaw(life.histories);
    if (fit.kind === 'fit') {
      const estimates = estimateLife(life.histories);
      note('shape', shape, fit.interval.low, fit.interval.high);
      noteLife('mean-life', weibullMeanLife(truth), estimates.meanLife);
      noteLife('tenth-gone', weibullB10(truth), estimates.tenthGone);
      noteSaving(fit, life.histories);
    }
    if (shape === 1) {
      const slope = fitPowerLaw(asset.histories);
      if (slope.kind === 'fit') note('slope', 1, slope.interval.low, slope.interval.high);
      const count = countFailures(asset.histories);
      const { low, high } = meanTimeInterval(count, totalExposure(asset.histories));
      note('mean-time', scale, low, high);
    }
    for (const { from, to, low, high } of piecewiseHazard(life.histories).bands) {
      const inBand = weibullCumulativeHazard(truth, to) - weibullCumulativeHazard(truth, from);
      note('hazard-band', inBand / (to - from), low, high);
    }
    noteForecast(whole, seen, fit);
  }
  return intervals
    .filter((name) => held.get(name)!.length >= fewestToShow)
    .map((interval) => ({ interval, shape, failures, ...shareOf(held.get(interval)!) }));

  function noteLife(
    name: IntervalName,
    value: number,
    estimate: { interval: { low: number | null; high: number | null } } | null,
  ): void {
    if (estimate !== null) note(name, value, estimate.interval.low, estimate.interval.high);
  }

  function noteSaving(
    fit: ReturnType<typeof fitPowerLaw>,
    histories: ReturnType<typeof lifeHistories>['histories'],
  ): void {
    const priced = priceRunToFailure(fit, histories, positions);
    if (priced.kind !== 'priced' || priced.changes.best === null) return;
    const { interval, savingPerYear, share } = priced.changes.best;
    // As on the screen: money is only named where items are seen to wear out and most draws agree.
    if (fit.kind !== 'fit' || !((fit.interval.low ?? 0) > 1) || share < 0.8) return;
    const saving = costRate(truth, null) - costRate(truth, interval);
    note('saving', saving * 365.25 * positions, savingPerYear.low, savingPerYear.high);
  }

  function noteForecast(
    whole: readonly Position[],
    seen: readonly Position[],
    fit: ReturnType<typeof fitPowerLaw>,
  ): void {
    const overall = { failures: count(seen, 0, watchedDays), exposure: positions * watchedDays };
    const lastYear = {
      failures: count(seen, watchedDays - daysAYear, watchedDays),
      exposure: positions * daysAYear,
    };
    const result = forecast({
      siteOf: () => ({ siteId: 'one', siteName: 'One' }),
      positions: seen,
      now: watchedDays,
      overall,
      lastYear,
      fit,
      currentInterval: null,
      leadTimeDays: null,
      serviceLevel: 0.95,
    });
    const year = result.kind === 'forecast' ? result.periods.find(({ months }) => months === 12) : undefined;
    if (year) note('forecast', count(whole, watchedDays, watchedDays + daysAYear), year.low, year.high);
  }
}

/** The cost rate of a life under a policy, `interval` null for run to failure. */
export function costRate(life: Weibull, interval: number | null): number {
  return ageReplacementCostRate(interval, life, costs);
}

/** Prices schedules for a class that runs to failure today. */
export function priceRunToFailure(
  fit: ReturnType<typeof fitPowerLaw>,
  histories: ReturnType<typeof lifeHistories>['histories'],
  positions: number,
): ReturnType<typeof priceSchedule> {
  return priceSchedule({
    clock: 'calendar-days',
    fit,
    lives: summariseLives(histories),
    patchedShare: 0,
    costs: { plannedMinor: costs.planned, failureMinor: costs.failure, groupPlannedMinor: null },
    current: { interval: null, task: null },
    positions,
    unitsAYear: 365.25,
    isGroup: false,
    maskedAge: null,
    hidden: null,
  });
}

function cutAt(position: Position, day: number): Position {
  return { ...position, watchTo: day, events: position.events.filter(({ at }) => at <= day) };
}

function count(positions: readonly Position[], after: number, until: number): number {
  return positions.reduce(
    (sum, { events }) => sum + events.filter(({ at }) => at > after && at <= until).length,
    0,
  );
}
