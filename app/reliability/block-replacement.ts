import type { ReplacementCosts } from './age-replacement';
import { weibullRenewalTable } from './renewal-function';
import { weibullMeanLife, type Weibull } from './weibull';

/** Grid steps of one search, and how far from its start the minimum must lie to be trusted. */
const steps = 800;
const fewestSteps = 60;

/**
 * Cost per clock unit and position of renewing all items of a group together every `interval`, failures
 * in between renewed one by one: C(T) = [C_p + C_f M(T)]/T, M the renewal function.
 * Source: Barlow & Hunter 1960 (block replacement).
 *
 * @param expectedFailures M(T) at the same interval.
 * @param costs `planned` is the cheaper group price for one position.
 */
export function blockReplacementCostRate(
  interval: number,
  expectedFailures: number,
  costs: ReplacementCosts,
): number {
  return (costs.planned + costs.failure * expectedFailures) / interval;
}

/** A block interval with what it costs per clock unit and position, and the failures expected in it. */
export interface BlockReplacement {
  readonly interval: number;
  readonly costRate: number;
  readonly expectedFailures: number;
}

/**
 * The block interval with the least cost rate, or null where it does not beat running to failure
 * (always so for β ≤ 1). Searched on the grid of the renewal table up to 4 η, with ever shorter tables
 * while the least lies near their start, then refined by a parabola through the three lowest points.
 */
export function bestBlockReplacement(life: Weibull, costs: ReplacementCosts): BlockReplacement | null {
  const { shape, scale } = life;
  if (!(shape > 1)) return null;
  for (let horizon = 4; horizon > Number.MIN_VALUE;) {
    const h = horizon / steps;
    const table = weibullRenewalTable({ shape, scale: 1 }, horizon, steps);
    const rate = (index: number): number =>
      blockReplacementCostRate(index * h * scale, table[index] ?? 0, costs);
    let best = 1;
    for (let index = 2; index <= steps; index += 1) if (rate(index) < rate(best)) best = index;
    if (best === steps || !(rate(best) < costs.failure / weibullMeanLife(life))) return null;
    if (best < fewestSteps) {
      horizon = Math.max(best, 2) * 4 * h;
      continue;
    }
    const [before, at, after] = [rate(best - 1), rate(best), rate(best + 1)];
    const shift = (before - after) / (2 * (before - 2 * at + after));
    const [below, here, above] = [table[best - 1] ?? 0, table[best] ?? 0, table[best + 1] ?? 0];
    const expectedFailures =
      here + (shift * (above - below)) / 2 + (shift ** 2 * (above - 2 * here + below)) / 2;
    const interval = (best + shift) * h * scale;
    return {
      interval,
      costRate: blockReplacementCostRate(interval, expectedFailures, costs),
      expectedFailures,
    };
  }
  return null;
}
