import { ageReplacementCostRate, bestAgeReplacement, type ReplacementCosts } from './age-replacement';
import { blockReplacementCostRate } from './block-replacement';
import { bestMinimalRepairInterval, minimalRepairCostRate } from './minimal-repair';
import { quantileOfSample } from './quantile-of-sample';
import { renewalTable } from './renewal-function';
import { weibullMeanLife, type Weibull } from './weibull';

/** What one way of renewing costs under one life; money is per clock unit and position. */
export interface PolicyUnderLife {
  /** @param interval above 0, or null where nothing is renewed by plan. */
  readonly costRate: (interval: number | null) => number;
  /** The interval with the least cost rate; null where none beats going without. */
  readonly bestInterval: () => number | null;
}

/** A way of renewing with its costs, to be priced under the fit and under each draw alike. */
export type RenewalPolicy = (life: Weibull) => PolicyUnderLife;

/** Renewal at an age or at failure, whichever comes first. */
export function ageReplacementPolicy(costs: ReplacementCosts): RenewalPolicy {
  return (life) => ({
    costRate: (interval) => ageReplacementCostRate(interval, life, costs),
    bestInterval: () => bestAgeReplacement(life, costs),
  });
}

/**
 * Failures patched, items renewed at an age. Patched for ever, a wearing item would cost without bound in
 * the end, so that going without renewal is priced at the ages the items have today.
 *
 * @param hazardToday failures per clock unit at today's ages under a life.
 */
export function minimalRepairPolicy(
  costs: ReplacementCosts,
  hazardToday: (life: Weibull) => number,
): RenewalPolicy {
  return (life) => ({
    costRate: (interval) =>
      interval === null ? costs.failure * hazardToday(life) : minimalRepairCostRate(interval, life, costs),
    bestInterval: () => bestMinimalRepairInterval(life, costs),
  });
}

/** The renewal function of every draw is tabulated up to so many η in so many steps. */
const tableReach = 3;
const tableSteps = 48;
const step = tableReach / tableSteps;
const logGrid = Float64Array.from({ length: tableSteps + 1 }, (_, i) => Math.log(i * step));
const logMidpoints = Float64Array.from({ length: tableSteps }, (_, k) => Math.log((k + 0.5) * step));
/** Up to this share of η hardly any item fails twice: M(T) is (T/η)^β, and the best interval that of minimal repair. */
const firstFailuresOnly = 0.25;

/**
 * A whole group renewed together, failures in between renewed one by one; `planned` is the price of one
 * position in a group. For many draws a coarse table of the renewal function does, read between its points
 * as a power of time; beyond its end failures come at one a mean life (elementary renewal theorem), and no interval is called best.
 */
export function blockReplacementPolicy(costs: ReplacementCosts): RenewalPolicy {
  return (life) => {
    const { shape, scale } = life;
    const meanLife = weibullMeanLife(life);
    const table = unitScaleTable(shape);
    const rateAt = (ratio: number, failures: number): number =>
      blockReplacementCostRate(ratio * scale, failures, costs);
    const runToFailure = costs.failure / meanLife;
    return {
      costRate: (interval) => {
        if (interval === null) return runToFailure;
        const ratio = interval / scale;
        const beyond = Math.max(0, ratio - tableReach) * (scale / meanLife);
        return rateAt(ratio, readTable(table, Math.min(ratio, tableReach), shape) + beyond);
      },
      bestInterval: () => {
        if (!(shape > 1)) return null;
        const early = bestMinimalRepairInterval({ shape, scale: 1 }, costs);
        if (early !== null && early < firstFailuresOnly) return early * scale;
        let best = 1;
        for (let i = 2; i <= tableSteps; i += 1) {
          if (rateAt(i * step, table[i]!) < rateAt(best * step, table[best]!)) best = i;
        }
        if (best === 1) return early === null ? null : early * scale;
        if (best === tableSteps) return null;
        const [before, at, after] = [best - 1, best, best + 1].map((i) => rateAt(i * step, table[i]!)) as [
          number,
          number,
          number,
        ];
        if (!(at < runToFailure)) return null;
        return (best + (before - after) / (2 * (before - 2 * at + after))) * step * scale;
      },
    };
  };
}

function unitScaleTable(shape: number): Float64Array {
  const failed = (logRatio: number): number => -Math.expm1(-Math.exp(shape * logRatio));
  return renewalTable(logGrid.map(failed), logMidpoints.map(failed));
}

function readTable(table: Float64Array, ratio: number, shape: number): number {
  const place = ratio / step;
  const index = Math.min(tableSteps - 1, Math.floor(place));
  if (index === 0) return table[1]! * place ** shape;
  const [below, above] = [table[index]!, table[index + 1]!];
  if (below === 0) return above * (place - index);
  return below * (above / below) ** (Math.log(place / index) / Math.log((index + 1) / index));
}

/** A range that holds the middle 80 % of the draws. */
export interface MiddleRange {
  readonly lower: number;
  readonly upper: number;
}

/** Everything the price of a change from today's schedule rests on; one clock unit, one money unit. */
export interface ScheduleQuestion {
  readonly policy: RenewalPolicy;
  /** Today's interval, or null where nothing is renewed by plan. */
  readonly currentInterval: number | null;
  /** The fit itself. */
  readonly fit: Weibull;
  /** Draws of what is not known about it, at least one. */
  readonly draws: readonly Weibull[];
}

/** What one interval costs and what changing to it saves against today's; per clock unit and position. */
export interface PricedInterval {
  /** Null for going without planned renewal. */
  readonly interval: number | null;
  readonly costRate: number;
  readonly costRange: MiddleRange;
  /** By the fit; below 0 where the change costs. */
  readonly saving: number;
  readonly savingRange: MiddleRange;
  /** Share of draws in which the change saves money; 0 where nothing would change. */
  readonly shareSaving: number;
}

export interface ScheduleValue {
  readonly today: PricedInterval;
  /** In the order asked. */
  readonly alternatives: readonly PricedInterval[];
  /** Middle 80 % of the best interval over the draws; an end is null where it is going without. */
  readonly bestIntervalRange: { readonly lower: number | null; readonly upper: number | null };
}

/**
 * What changes of an interval are worth against today's policy, and how sure that is: each change is
 * priced under the fit and again under each draw of (β, η).
 */
export function scheduleValue(
  { policy, currentInterval, fit, draws }: ScheduleQuestion,
  alternatives: readonly (number | null)[],
): ScheduleValue {
  const underFit = policy(fit);
  const underDraws = draws.map(policy);
  const currentRate = underFit.costRate(currentInterval);
  const currentRates = underDraws.map((priced) => priced.costRate(currentInterval));
  const price = (interval: number | null): PricedInterval => {
    const costRate = underFit.costRate(interval);
    const rates = underDraws.map((priced) => priced.costRate(interval));
    const savings = rates.map((rate, index) => currentRates[index]! - rate);
    return {
      interval,
      costRate,
      costRange: middleRange(rates),
      saving: currentRate - costRate,
      savingRange: middleRange(savings),
      shareSaving: savings.filter((saving) => saving > 0).length / draws.length,
    };
  };
  const best = middleRange(underDraws.map((priced) => priced.bestInterval() ?? Infinity));
  return {
    today: price(currentInterval),
    alternatives: alternatives.map(price),
    bestIntervalRange: { lower: finiteOrNull(best.lower), upper: finiteOrNull(best.upper) },
  };
}

/** Cost of one interval with the middle 80 % of the draws. */
export interface CostCurvePoint {
  readonly interval: number;
  readonly costRate: number;
  readonly lower: number;
  readonly upper: number;
}

/**
 * Points of cost per clock unit against interval, with a band for what is not known.
 *
 * @param intervals above 0, as the chart wants them.
 */
export function costCurve(
  intervals: readonly number[],
  { policy, fit, draws }: Pick<ScheduleQuestion, 'policy' | 'fit' | 'draws'>,
): CostCurvePoint[] {
  const underFit = policy(fit);
  const underDraws = draws.map(policy);
  return intervals.map((interval) => ({
    interval,
    costRate: underFit.costRate(interval),
    ...middleRange(underDraws.map((priced) => priced.costRate(interval))),
  }));
}

function middleRange(values: readonly number[]): MiddleRange {
  const sorted = Array.from(Float64Array.from(values).sort());
  return { lower: quantileOfSample(sorted, 0.1), upper: quantileOfSample(sorted, 0.9) };
}

function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
