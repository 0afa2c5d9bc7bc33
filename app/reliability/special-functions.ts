import betainc from '@stdlib/math-base-special-betainc';
import gammaFunction from '@stdlib/math-base-special-gamma';
import gammainc from '@stdlib/math-base-special-gammainc';
import gammaln from '@stdlib/math-base-special-gammaln';
import libraryBetaQuantile from '@stdlib/stats-base-dists-beta-quantile';
import libraryBinomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import libraryChiSquaredQuantile from '@stdlib/stats-base-dists-chisquare-quantile';
import libraryNormalCdf from '@stdlib/stats-base-dists-normal-cdf';
import libraryNormalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import libraryPoissonQuantile from '@stdlib/stats-base-dists-poisson-quantile';
import { largeIncompleteGamma, poissonTerm } from './large-incomplete-gamma';

/*
 * The distributions this folder needs, under one name each. They come from the library; where its values
 * part from R's (the incomplete gamma function above 1000, the normal quantile far out) they are mended
 * here, and the reference tests hold every one of them to R at the centre and in the tails.
 * Arguments outside a function's domain give NaN, as in the library.
 */

/** Above this argument the library's incomplete gamma function loses its digits. */
const largeArgument = 1000;

/** Below this probability the library's normal quantile loses its digits. */
const farTail = 1e-5;

/** P(Z ≤ z) for a standard normal Z. */
export function normalCdf(z: number): number {
  return libraryNormalCdf(z, 0, 1);
}

/** P(Z > z) for a standard normal Z, with its digits kept in the far tail. */
export function normalUpperTail(z: number): number {
  return libraryNormalCdf(-z, 0, 1);
}

/** z with P(Z ≤ z) = p. */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < farTail)) return libraryNormalQuantile(p, 0, 1);
  // Abramowitz & Stegun 1964, 26.2.23 (within 4.5e−4), then Halley's step on the distribution function.
  const t = Math.sqrt(-2 * Math.log(p));
  const numerator = 2.515517 + t * (0.802853 + t * 0.010328);
  const denominator = 1 + t * (1.432788 + t * (0.189269 + t * 0.001308));
  let z = numerator / denominator - t;
  for (let step = 0; step < 3; step += 1) {
    const error = (normalCdf(z) - p) * Math.sqrt(2 * Math.PI) * Math.exp((z * z) / 2);
    z -= error / (1 + (z * error) / 2);
  }
  return z;
}

/** Γ(x). */
export function gamma(x: number): number {
  return gammaFunction(x);
}

/** ln Γ(x), x > 0. */
export function logGamma(x: number): number {
  return gammaln(x);
}

/** P(a, x), the regularised lower incomplete gamma function. */
export function regularizedGammaLower(a: number, x: number): number {
  if (x === Infinity) return 1;
  if (x > largeArgument && a > 0) return largeIncompleteGamma(a, x).lower;
  return gammainc(x, a, true, false);
}

/** Q(a, x) = 1 − P(a, x), with its digits kept in the far tail. */
export function regularizedGammaUpper(a: number, x: number): number {
  if (x === Infinity) return 0;
  if (x > largeArgument && a > 0) return largeIncompleteGamma(a, x).upper;
  return gammainc(x, a, true, true);
}

/** P(X ≤ x) for X chi-squared on `df` degrees of freedom (df > 0, need not be whole). */
export function chiSquaredCdf(x: number, df: number): number {
  return x <= 0 ? 0 : regularizedGammaLower(df / 2, x / 2);
}

/** P(X > x) for X chi-squared on `df` degrees of freedom, with its digits kept in the far tail. */
export function chiSquaredUpperTail(x: number, df: number): number {
  return x <= 0 ? 1 : regularizedGammaUpper(df / 2, x / 2);
}

/** x with P(X ≤ x) = p for X chi-squared on `df` degrees of freedom. */
export function chiSquaredQuantile(p: number, df: number): number {
  let x = libraryChiSquaredQuantile(p, df);
  if (!(x > 2 * largeArgument && x < Infinity)) return x;
  for (let step = 0; step < 4; step += 1) {
    const error = p < 0.5 ? chiSquaredCdf(x, df) - p : 1 - p - chiSquaredUpperTail(x, df);
    x -= error / (poissonTerm(df / 2, x / 2) * (df / (2 * x)));
  }
  return x;
}

/** P(X ≤ k) for X Poisson with the given mean ≥ 0. */
export function poissonCdf(k: number, mean: number): number {
  if (k < 0) return 0;
  return mean === 0 ? 1 : regularizedGammaUpper(Math.floor(k) + 1, mean);
}

/** P(X > k) for X Poisson with the given mean ≥ 0, with its digits kept in the far tail. */
export function poissonUpperTail(k: number, mean: number): number {
  if (k < 0) return 1;
  return mean === 0 ? 0 : regularizedGammaLower(Math.floor(k) + 1, mean);
}

/** Smallest k with P(X ≤ k) ≥ p for X Poisson with the given mean ≥ 0; Infinity at p = 1. */
export function poissonQuantile(p: number, mean: number): number {
  if (mean === 0) return p >= 0 && p <= 1 ? 0 : NaN;
  let k = libraryPoissonQuantile(p, mean);
  if (!Number.isFinite(k)) return k;
  while (k > 0 && poissonCdf(k - 1, mean) >= p) k -= 1;
  while (poissonCdf(k, mean) < p) k += 1;
  return k;
}

/** P(X ≤ k) for X binomial: n trials of chance p. */
export function binomialCdf(k: number, n: number, p: number): number {
  return libraryBinomialCdf(k, n, p);
}

/** Smallest k with P(X ≤ k) ≥ `probability` for X binomial: n trials of chance `chance`. */
export function binomialQuantile(probability: number, n: number, chance: number): number {
  if (!(probability >= 0 && probability <= 1 && chance >= 0 && chance <= 1)) return NaN;
  let below = -1;
  let atLeast = n;
  while (atLeast - below > 1) {
    const middle = Math.floor((below + atLeast) / 2);
    if (binomialCdf(middle, n, chance) >= probability) atLeast = middle;
    else below = middle;
  }
  return atLeast;
}

/** x with P(X ≤ x) = p for X beta with shapes a and b. */
export function betaQuantile(p: number, a: number, b: number): number {
  return libraryBetaQuantile(p, a, b);
}

/** I_x(a, b): the regularised incomplete beta function, x in [0, 1], a and b above 0. */
export function regularizedBeta(x: number, a: number, b: number): number {
  return betainc(x, a, b, true, false);
}
