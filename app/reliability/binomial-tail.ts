import { logGamma } from './special-functions';

/** P(X = k) for X binomial: n trials of chance p in (0, 1), by logarithms so that large n does not underflow early. */
export function binomialProbability(k: number, n: number, p: number): number {
  if (k < 0 || k > n) return 0;
  if (p <= 0) return k === 0 ? 1 : 0;
  if (p >= 1) return k === n ? 1 : 0;
  const logChoose = logGamma(n + 1) - logGamma(k + 1) - logGamma(n - k + 1);
  return Math.exp(logChoose + k * Math.log(p) + (n - k) * Math.log1p(-p));
}

/**
 * P(X ≥ k) for X binomial: n trials of chance p, summed from k upwards (or from k − 1 downwards where that
 * is the smaller part), so that a small tail keeps its digits.
 */
export function binomialAtLeast(k: number, n: number, p: number): number {
  if (k <= 0) return 1;
  if (k > n) return 0;
  if (p <= 0) return 0;
  if (p >= 1) return 1;
  return k > n * p ? upwards(k, n, p) : Math.max(0, 1 - downwards(k - 1, n, p));
}

/** P(X ≤ k), with the same care. */
export function binomialAtMost(k: number, n: number, p: number): number {
  if (k < 0) return 0;
  if (k >= n) return 1;
  return binomialAtLeast(n - k, n, 1 - p);
}

function upwards(k: number, n: number, p: number): number {
  const odds = p / (1 - p);
  let term = binomialProbability(k, n, p);
  let sum = term;
  for (let next = k + 1; next <= n && term > sum * 1e-17; next += 1) {
    term *= ((n - next + 1) / next) * odds;
    sum += term;
  }
  return Math.min(sum, 1);
}

function downwards(k: number, n: number, p: number): number {
  const odds = (1 - p) / p;
  let term = binomialProbability(k, n, p);
  let sum = term;
  for (let next = k - 1; next >= 0 && term > sum * 1e-17; next -= 1) {
    term *= ((next + 1) / (n - next)) * odds;
    sum += term;
  }
  return Math.min(sum, 1);
}
