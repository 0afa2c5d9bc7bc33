import { gamma, regularizedGammaLower } from './special-functions';

/** A Weibull life: survival exp(−(t/η)^β), β = `shape`, η = `scale` in any one clock unit. */
export interface Weibull {
  readonly shape: number;
  readonly scale: number;
}

/** R(t): share still alive at age t ≥ 0. */
export function weibullSurvival({ shape, scale }: Weibull, age: number): number {
  return Math.exp(-((age / scale) ** shape));
}

/** H(t) = (t/η)^β. */
export function weibullCumulativeHazard({ shape, scale }: Weibull, age: number): number {
  return (age / scale) ** shape;
}

/** h(t) = (β/η)(t/η)^(β−1), failures per unit at age t; Infinity at age 0 where β < 1. */
export function weibullHazard({ shape, scale }: Weibull, age: number): number {
  return (shape / scale) * (age / scale) ** (shape - 1);
}

/** Mean life η Γ(1 + 1/β). Infinity where β is so small that no number holds it (below about 0.006). */
export function weibullMeanLife({ shape, scale }: Weibull): number {
  return scale * gamma(1 + 1 / shape);
}

/** Age by which the share `failedShare` in (0, 1) has failed: η (−ln(1 − p))^(1/β). */
export function weibullQuantile({ shape, scale }: Weibull, failedShare: number): number {
  return scale * (-Math.log1p(-failedShare)) ** (1 / shape);
}

/** B10 life: the age by which one in ten has failed. */
export function weibullB10(weibull: Weibull): number {
  return weibullQuantile(weibull, 0.1);
}

/**
 * Mean life cut off at T: ∫₀ᵀ R(t) dt = η Γ(1 + 1/β) P(1/β, (T/η)^β). Where the argument is small the
 * series T e^(−x) Σ xⁿ/((a+1)…(a+n)), a = 1/β, x = (T/η)^β, is taken (Abramowitz & Stegun 1964, 6.5.29),
 * which never meets the huge Γ of a small β.
 */
export function weibullRestrictedMean(weibull: Weibull, cutOff: number): number {
  if (cutOff <= 0) return 0;
  const a = 1 / weibull.shape;
  const x = weibullCumulativeHazard(weibull, cutOff);
  if (x >= a + 1) return weibullMeanLife(weibull) * regularizedGammaLower(a, x);
  let term = 1;
  let sum = 1;
  for (let n = 1; term > sum * 1e-17; n += 1) {
    term *= x / (a + n);
    sum += term;
  }
  return cutOff * Math.exp(-x) * sum;
}
