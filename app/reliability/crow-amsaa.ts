import type { History } from './history';
import { chiSquaredQuantile } from './special-functions';

/** Closed-form power-law slope for positions all watched from age 0 to one and the same age. */
export interface CrowAmsaaSlope {
  /** β̂ = N / ΣΣ ln(T/t), the maximum-likelihood slope. */
  readonly shape: number;
  /** β̃ = (N − 1) β̂ / N, unbiased; used for goodness of fit. */
  readonly unbiasedShape: number;
  /** λ̂ = N / (k T^β̂) for k positions: expected failures of one position by age t are λ̂ t^β̂. */
  readonly intensity: number;
  readonly failures: number;
  /** Exact two-sided interval for β: β̂ χ²(2N)/(2N). */
  readonly interval: { readonly low: number; readonly high: number };
}

/**
 * The closed form of the Crow-AMSAA slope with its exact interval.
 *
 * @param histories on the asset clock.
 * @returns null where the closed form does not hold (a late entry, unequal exits) or gives no number (no
 *   failure, or all of them at the very end).
 *
 * Sources: Crow 1975 (AMSAA TR-138); MIL-HDBK-189 (1981), Appendix C; IEC 61164.
 */
export function crowAmsaaSlope(histories: readonly History[], level = 0.9): CrowAmsaaSlope | null {
  const exit = histories[0]?.exit;
  if (exit === undefined || histories.some((h) => h.entry !== 0 || h.exit !== exit)) return null;
  const logs = Float64Array.from(
    histories.flatMap(({ failures }) => failures.map((time) => Math.log(exit / time))),
  ).sort();
  const sum = logs.reduce((total, log) => total + log, 0);
  if (!(sum > 0)) return null;
  const failures = logs.length;
  const shape = failures / sum;
  const tail = (1 - level) / 2;
  const factor = (p: number) => chiSquaredQuantile(p, 2 * failures) / (2 * failures);
  return {
    shape,
    unbiasedShape: ((failures - 1) * shape) / failures,
    intensity: Math.exp(Math.log(failures / histories.length) - shape * Math.log(exit)),
    failures,
    interval: { low: shape * factor(tail), high: shape * factor(1 - tail) },
  };
}
