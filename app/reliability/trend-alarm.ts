import { mixedBets, type EValue } from './e-value';

/**
 * Trend alarm: a test martingale against a constant rate on the pooled exposure clock, valid however
 * often it is looked at.
 *
 * With failures at pooled exposures s_1 ≤ … ≤ s_n, V_k = k ln(s_{k+1}/s_k) are independent Exp(1) under a
 * constant rate and exponential with rate β under a power law of slope β. With S = Σ V_k,
 *
 *     E = mean over β of β^(n−1) exp(−(β−1) S)
 *
 * ever reaches 1/α with chance at most α under a constant rate (Ville 1939; Ramdas, Grünwald, Vovk &
 * Shafer 2023). S and n are all that the past leaves behind, so a night adds only its new failures.
 */

/** Slopes that bet on a rising rate. */
export const risingSlopes: readonly number[] = [1.2, 1.5, 2, 3];

/** The mirror set, betting on a falling rate. */
export const fallingSlopes: readonly number[] = [1 / 1.2, 1 / 1.5, 1 / 2, 1 / 3];

/** What is left of all failures so far. */
export interface TrendAlarmState {
  readonly failures: number;
  /** S = Σ k ln(s_{k+1}/s_k). */
  readonly sum: number;
  /** Pooled exposure of the last failure; null before there is one. */
  readonly lastExposure: number | null;
}

export const emptyTrendAlarm: TrendAlarmState = { failures: 0, sum: 0, lastExposure: null };

/**
 * The state after one more failure. A rebuild is a fold of this over all failures, so that the two agree
 * to the last bit.
 *
 * @param exposure of all positions together when it failed, clock units, above 0. Failures of one moment
 *   come split over the step of the record, in the order of entry (the pooled exposure clock does so): left
 *   at one exposure each adds V = 0, which reads as a rush.
 * @throws RangeError when the failure lies before the last one (rebuild from records then) or at no exposure.
 */
export function appendToTrendAlarm(state: TrendAlarmState, exposure: number): TrendAlarmState {
  if (!(exposure > 0 && exposure < Infinity)) throw new RangeError(`exposure ${exposure} is not above 0`);
  const { failures, sum, lastExposure } = state;
  if (lastExposure === null) return { failures: 1, sum: 0, lastExposure: exposure };
  if (exposure < lastExposure) {
    throw new RangeError(`exposure ${exposure} lies before the last failure at ${lastExposure}`);
  }
  return {
    failures: failures + 1,
    sum: sum + failures * Math.log(exposure / lastExposure),
    lastExposure: exposure,
  };
}

/** The state after all of a class's failures, in ascending order of exposure. */
export function rebuildTrendAlarm(exposures: Iterable<number>): TrendAlarmState {
  let state = emptyTrendAlarm;
  for (const exposure of exposures) state = appendToTrendAlarm(state, exposure);
  return state;
}

/** What the alarm says now. */
export interface TrendAlarm {
  readonly failures: number;
  /** S = Σ k ln(s_{k+1}/s_k). */
  readonly sum: number;
  readonly rising: EValue;
  readonly falling: EValue;
}

/** E of both sets of bets for the failures in a state; E = 1 before the second failure. */
export function trendAlarm({ failures, sum }: TrendAlarmState): TrendAlarm {
  const against = (slopes: readonly number[]): EValue =>
    mixedBets(slopes.map((slope) => Math.max(failures - 1, 0) * Math.log(slope) - (slope - 1) * sum));
  return { failures, sum, rising: against(risingSlopes), falling: against(fallingSlopes) };
}
