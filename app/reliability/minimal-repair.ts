import type { Weibull } from './weibull';

/**
 * Minimal repair with periodic renewal: failures are patched at C_f each and leave the age as it is; the
 * item is renewed at age T for C_p. Under a power law C(T) = [C_p + C_f (T/η)^β]/T.
 * Source: Barlow & Hunter 1960, policy II.
 */
export interface MinimalRepairCosts {
  /** Cost of one planned renewal, above 0. */
  readonly planned: number;
  /** Cost of one patched failure, above 0. */
  readonly failure: number;
}

/** Cost per clock unit of renewing at age `interval`; `scale` and `interval` in one clock unit. */
export function minimalRepairCostRate(
  interval: number,
  { shape, scale }: Weibull,
  costs: MinimalRepairCosts,
): number {
  return (costs.planned + costs.failure * (interval / scale) ** shape) / interval;
}

/**
 * T* = η (C_p/(C_f (β − 1)))^(1/β), in the unit of `scale`.
 *
 * @returns null for β ≤ 1, where patching for ever is cheapest.
 */
export function bestMinimalRepairInterval(
  { shape, scale }: Weibull,
  costs: MinimalRepairCosts,
): number | null {
  if (!(shape > 1)) return null;
  const best = scale * (costs.planned / (costs.failure * (shape - 1))) ** (1 / shape);
  return Number.isFinite(best) ? best : null;
}
