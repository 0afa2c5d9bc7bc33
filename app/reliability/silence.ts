import { weibullCumulativeHazard, type Weibull } from './weibull';

/**
 * Chance of a silence at least as long as the present one at a fitted rate, e^(−ΔH) with ΔH the failures
 * expected since the last one (Poisson process). A small chance says that logging may have stopped.
 *
 * Fit the rate on the records up to the last failure, or the silence talks the rate down.
 */

/** With a constant rate: failures per clock unit of one position, and exposure of all positions since. */
export function silenceChance(rate: number, exposureSince: number): number {
  return Math.exp(-Math.max(0, rate * exposureSince));
}

/** Stretch of one item's age that passed in silence, clock units: `0 ≤ from ≤ to`. */
export interface SilentStretch {
  readonly from: number;
  readonly to: number;
}

/** With wear-out (a Weibull life): the age stretches run through by all items since the last failure. */
export function silenceChanceByAge(life: Weibull, stretches: readonly SilentStretch[]): number {
  let expected = 0;
  for (const { from, to } of stretches)
    expected += weibullCumulativeHazard(life, to) - weibullCumulativeHazard(life, from);
  return Math.exp(-Math.max(0, expected));
}
