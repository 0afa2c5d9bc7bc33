import { weibullMeanLife, weibullRestrictedMean, weibullSurvival, type Weibull } from './weibull';

/** What one renewal costs, in one money unit. */
export interface ReplacementCosts {
  /** C_p: one planned renewal, above 0. */
  readonly planned: number;
  /** C_f: one failure with labour, parts and consequence, above 0. */
  readonly failure: number;
}

/** Beyond this cumulative hazard fewer than 1 item in 10²¹ is left: renewing there is running to failure. */
const nobodyLeft = 50;

/**
 * Cost per clock unit of renewing at age `interval` or at failure, whichever comes first:
 * C(T) = [C_p R(T) + C_f (1 − R(T))] / ∫₀ᵀ R(t) dt.
 * Source: Barlow & Hunter 1960, policy I.
 *
 * @param interval T above 0 in the unit of the life's scale, or null to run to failure: C_f/MTTF.
 */
export function ageReplacementCostRate(
  interval: number | null,
  life: Weibull,
  costs: ReplacementCosts,
): number {
  if (interval === null) return costs.failure / weibullMeanLife(life);
  const survives = weibullSurvival(life, interval);
  const costOfOneLife = costs.planned * survives + costs.failure * (1 - survives);
  return costOfOneLife / weibullRestrictedMean(life, interval);
}

/**
 * The interval with the least cost rate, or null where running to failure is cheapest (β ≤ 1, or a
 * failure that costs no more than a planned renewal, or a best age that no item reaches).
 *
 * T* solves h(T) ∫₀ᵀ R dt − F(T) = C_p/(C_f − C_p); the left side rises from 0 without bound for β > 1
 * (Barlow & Hunter 1960), so that the root is the only one. Newton's steps on its logarithm in ln T,
 * held in a shrinking bracket.
 */
export function bestAgeReplacement({ shape, scale }: Weibull, costs: ReplacementCosts): number | null {
  if (!(shape > 1) || !(costs.failure > costs.planned)) return null;
  const target = Math.log(costs.planned / (costs.failure - costs.planned));
  let low = -Infinity;
  let high = Math.log(nobodyLeft) / shape;
  if (gain(high, shape).log < target) return null;
  // For small x = T/η the left side is (β − 1) x^β.
  let position = Math.min((target - Math.log(shape - 1)) / shape, high);
  for (let step = 0; step < 200; step += 1) {
    const { log, slope } = gain(position, shape);
    if (log > target) high = position;
    else low = position;
    let next = position - (log - target) / slope;
    if (!(next >= low && next <= high)) next = low === -Infinity ? position - 1 : (low + high) / 2;
    if (Math.abs(next - position) < 1e-12 * Math.max(1, Math.abs(position))) break;
    position = next;
  }
  const best = Math.exp(position) * scale;
  return best > 0 && Number.isFinite(best) ? best : null;
}

/** ln of g(x) = h(x) ∫₀ˣ R − F(x) for a Weibull life of scale 1 at x = e^position, and its slope by position. */
function gain(position: number, shape: number): { log: number; slope: number } {
  const x = Math.exp(position);
  const hazard = x ** shape;
  // Below this the difference of two nearly equal numbers is worth less than its leading term.
  if (hazard < 1e-6) return { log: Math.log(shape - 1) + shape * position, slope: shape };
  const expected = (shape * hazard * weibullRestrictedMean({ shape, scale: 1 }, x)) / x;
  const value = expected + Math.expm1(-hazard);
  return { log: Math.log(value), slope: ((shape - 1) * expected) / value };
}
