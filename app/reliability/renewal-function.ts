import { weibullCumulativeHazard, type Weibull } from './weibull';

/**
 * Renewal functions by the Riemann–Stieltjes method: M(t), the failures expected by t at one position
 * whose item is renewed at each failure, solves M(t) = F(t) + ∫₀ᵗ M(t − u) dF(u). With x_j the midpoints
 * of a grid t_0 … t_n,
 *
 *     M_i = [F(t_i) + Σ_{j<i} F(t_i − x_j)(M_j − M_{j−1}) − F(t_i − x_i) M_{i−1}] / [1 − F(t_i − x_i)]
 *
 * Source: Xie 1989, "On the solution of renewal-type integral equations".
 */

/** Grid steps that give the renewal function of a Weibull life four digits up to a few mean lives. */
const accurateSteps = 800;

/**
 * The same equation with planned renewals: an item may leave its place by failing or by plan. Without
 * planned renewals the two chances are one.
 *
 * @param failedBy chance that a new item has failed in place by t_i = i h, at index i (index 0 is not read).
 * @param leftBy chance that it has left, failed or renewed, by (k + ½) h, at index k; index 0 below 1.
 * @returns failures expected by t_0 … t_n, as many as `failedBy` has.
 */
export function renewalTable(failedBy: Float64Array, leftBy: Float64Array): Float64Array {
  const table = new Float64Array(failedBy.length);
  const increments = new Float64Array(failedBy.length);
  const first = leftBy[0] ?? 0;
  for (let i = 1; i < failedBy.length; i += 1) {
    let sum = failedBy[i]!;
    for (let j = 1; j < i; j += 1) sum += leftBy[i - j]! * increments[j]!;
    const before = table[i - 1]!;
    const value = Math.max(before, (sum - first * before) / (1 - first));
    table[i] = value;
    increments[i] = value - before;
  }
  return table;
}

/** M of a Weibull life at 0, h, 2h, … `horizon`, h = horizon/steps; `horizon` above 0 in the unit of the scale. */
export function weibullRenewalTable(life: Weibull, horizon: number, steps: number): Float64Array {
  const cdf = (at: number): number => -Math.expm1(-weibullCumulativeHazard(life, at));
  const h = horizon / steps;
  return renewalTable(
    Float64Array.from({ length: steps + 1 }, (_, i) => cdf(i * h)),
    Float64Array.from({ length: steps }, (_, k) => cdf((k + 0.5) * h)),
  );
}

/**
 * M(t) of a Weibull life: failures expected by `time` at one position that starts with a new item.
 *
 * @param time at least 0, in the unit of the life's scale.
 * @param steps of the grid; more are needed the more mean lives `time` spans.
 */
export function weibullRenewalFunction(life: Weibull, time: number, steps: number = accurateSteps): number {
  return time === 0 ? 0 : weibullRenewalTable(life, time, steps)[steps]!;
}
