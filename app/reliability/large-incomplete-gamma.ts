import logGamma from '@stdlib/math-base-special-gammaln';

/** Terms are added until they no longer change the sum; √a terms are typical, so this is never met. */
const maximumTerms = 10_000_000;

/**
 * Regularised incomplete gamma functions P(a, x) and Q(a, x) = 1 − P(a, x) for large x.
 *
 * The library's own function takes an asymptotic branch for x > 1000 that is wrong from the third digit
 * (it is off by about one term near x = a), so this stands in its place there: the series for P where
 * x < a + 1 and the continued fraction for Q elsewhere (Abramowitz & Stegun 1964, 6.5.29 and 6.5.31; the
 * fraction by Lentz's method as modified by Thompson & Barnett 1986), each times x^a e^(−x)/Γ(a + 1) in
 * Loader's saddle-point form, which keeps its digits where the plain logarithms would cancel.
 *
 * @param a shape, above 0.
 * @param x argument, meant to be above 1000.
 */
export function largeIncompleteGamma(a: number, x: number): { lower: number; upper: number } {
  const prefix = poissonTerm(a, x);
  if (x < a + 1) {
    const lower = Math.min(1, prefix * seriesOfLower(a, x));
    return { lower, upper: 1 - lower };
  }
  const upper = Math.min(1, prefix * a * fractionOfUpper(a, x));
  return { lower: 1 - upper, upper };
}

/**
 * x^a e^(−x) / Γ(a + 1), for real a: the Poisson term.
 *
 * Source: Loader, "Fast and accurate computation of binomial probabilities" (2000).
 */
export function poissonTerm(a: number, x: number): number {
  if (a < 15) return Math.exp(a * Math.log(x) - x - logGamma(a + 1));
  return Math.exp(-stirlingError(a) - deviance(a, x)) / Math.sqrt(2 * Math.PI * a);
}

/** ln Γ(a + 1) minus Stirling's formula, for a ≥ 15. Abramowitz & Stegun 1964, 6.1.41. */
function stirlingError(a: number): number {
  const square = a * a;
  return (1 / 12 - (1 / 360 - (1 / 1260 - (1 / 1680 - 1 / 1188 / square) / square) / square) / square) / a;
}

/** a ln(a/x) + x − a without cancellation where x is close to a. */
function deviance(a: number, x: number): number {
  const v = (a - x) / (a + x);
  if (Math.abs(v) >= 0.1) return a * Math.log(a / x) + x - a;
  // ln(a/x) = 2(v + v³/3 + v⁵/5 + …); the first term joins x − a to (a − x)·v.
  let sum = (a - x) * v;
  let power = 2 * a * v;
  for (let odd = 3; ; odd += 2) {
    power *= v * v;
    const next = sum + power / odd;
    if (next === sum) return sum;
    sum = next;
  }
}

function seriesOfLower(a: number, x: number): number {
  let term = 1;
  let sum = 1;
  for (let n = 1; n < maximumTerms; n += 1) {
    term *= x / (a + n);
    sum += term;
    if (term < sum * 1e-17) break;
  }
  return sum;
}

function fractionOfUpper(a: number, x: number): number {
  const tiny = 1e-300;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / (b === 0 ? tiny : b);
  let value = d;
  for (let n = 1; n < maximumTerms; n += 1) {
    const coefficient = -n * (n - a);
    b += 2;
    d = coefficient * d + b;
    if (Math.abs(d) < tiny) d = tiny;
    c = b + coefficient / c;
    if (Math.abs(c) < tiny) c = tiny;
    d = 1 / d;
    const step = c * d;
    value *= step;
    if (Math.abs(step - 1) < 2e-16) break;
  }
  return value;
}
