import { normalQuantile } from './special-functions';
import type { Weibull } from './weibull';

/** Number of fixed draws: the same on every night, so that advice moves only when the data do. */
export const drawCount = 400;

/** A fit with the asymptotic covariance of (ln β̂, ln η̂), as the power-law fit gives it. */
export interface UncertainWeibull extends Weibull {
  readonly covariance: { readonly lnShape: number; readonly lnScale: number; readonly cross: number };
}

/**
 * 400 points of the R2 sequence carried to standard-normal pairs: u_k = frac(½ + k g⁻¹),
 * v_k = frac(½ + k g⁻²), g = 1.3247… the real root of x³ = x + 1. It fills the square evenly at any
 * length and needs no table. Source: Roberts 2018, "The unreasonable effectiveness of quasirandom
 * sequences"; the additive recurrence itself is Kronecker's (Niederreiter 1992).
 */
export const normalPairs: readonly (readonly [number, number])[] = Array.from(
  { length: drawCount },
  (_, index) => {
    const g = 1.324717957244746;
    const fraction = (step: number): number => (0.5 + (index + 1) * step) % 1;
    return [normalQuantile(fraction(1 / g)), normalQuantile(fraction(1 / (g * g)))] as const;
  },
);

/** ln β and ln η of a draw are held within this of the fit's, so that no power of a draw overflows. */
const furthest = 5;

/**
 * Draws of (β, η) from the asymptotic normal of (ln β̂, ln η̂), by the Cholesky factor of the covariance.
 *
 * @throws RangeError when the covariance is not finite or not positive semi-definite.
 */
export function weibullDraws(fit: UncertainWeibull): Weibull[] {
  const { lnShape: varShape, lnScale: varScale, cross } = fit.covariance;
  const sdShape = Math.sqrt(varShape);
  const slope = sdShape > 0 ? cross / sdShape : 0;
  const rest = varScale - slope * slope;
  if (!(varShape >= 0 && varScale >= 0 && rest >= -1e-9 * varScale) || !Number.isFinite(rest + varShape)) {
    throw new RangeError('the covariance of the fit is not positive semi-definite');
  }
  const sdRest = Math.sqrt(Math.max(0, rest));
  const held = (deviation: number): number => Math.min(furthest, Math.max(-furthest, deviation));
  return normalPairs.map(([z1, z2]) => ({
    shape: fit.shape * Math.exp(held(sdShape * z1)),
    scale: fit.scale * Math.exp(held(slope * z1 + sdRest * z2)),
  }));
}
