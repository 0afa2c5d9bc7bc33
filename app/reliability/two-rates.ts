import { binomialAtLeast, binomialAtMost, binomialProbability } from './binomial-tail';
import { betaQuantile } from './special-functions';

/** Failures counted in an exposure. */
export interface CountInExposure {
  /** Whole number, at least 0. */
  readonly failures: number;
  /** Above 0, clock units. */
  readonly exposure: number;
}

export interface TwoRates {
  /** Rate of the first over rate of the second; null when both counts are 0 or the second is 0. */
  readonly ratio: number | null;
  /** Two-sided exact p of equal rates. */
  readonly p: number;
  /** Lower end of the exact interval of the ratio. */
  readonly lower: number;
  /** Upper end; null where no upper end exists (no failure in the second). */
  readonly upper: number | null;
}

/**
 * Exact conditional test of two Poisson rates: given n = n1 + n2, n1 is binomial with chance
 * ρ T1/(ρ T1 + T2), ρ the rate ratio. The two-sided p adds up all outcomes no more likely than the one
 * seen; the interval of ρ is the Clopper–Pearson interval carried over.
 *
 * Source: Przyborowski & Wilenski 1940; Clopper & Pearson 1934; as in R's `poisson.test`.
 *
 * @param confidence of the two-sided interval, in (0, 1).
 * @throws RangeError when a count is not a whole number of 0 or more or an exposure is not above 0.
 */
export function compareTwoRates(
  first: CountInExposure,
  second: CountInExposure,
  confidence: number,
): TwoRates {
  for (const { failures, exposure } of [first, second]) {
    if (!(Number.isInteger(failures) && failures >= 0)) throw new RangeError(`${failures} is not a count`);
    if (!(exposure > 0 && exposure < Infinity)) throw new RangeError(`exposure ${exposure} is not above 0`);
  }
  const n = first.failures + second.failures;
  if (n === 0) return { ratio: null, p: 1, lower: 0, upper: null };
  const alpha = 1 - confidence;
  const toRatio = (chance: number): number => (chance / (1 - chance)) * (second.exposure / first.exposure);
  const { failures: k } = first;
  return {
    ratio: second.failures === 0 ? null : k / first.exposure / (second.failures / second.exposure),
    p: twoSidedBinomial(k, n, first.exposure / (first.exposure + second.exposure)),
    lower: k === 0 ? 0 : toRatio(betaQuantile(alpha / 2, k, n - k + 1)),
    upper: k === n ? null : toRatio(betaQuantile(1 - alpha / 2, k + 1, n - k)),
  };
}

/** Sum of P(X = j) over all j no more likely than k; the other tail's end is found by bisection, as the chances fall off on either side of the mode. */
function twoSidedBinomial(k: number, n: number, chance: number): number {
  // Outcomes equally likely but for rounding count as no more likely (R uses the same slack).
  const limit = binomialProbability(k, n, chance) * (1 + 1e-7);
  const mode = Math.min(n, Math.floor((n + 1) * chance));
  if (k === mode) return 1;
  if (k < mode) {
    let likelier = mode;
    let noMore = n + 1;
    while (noMore - likelier > 1) {
      const middle = Math.floor((likelier + noMore) / 2);
      if (binomialProbability(middle, n, chance) <= limit) noMore = middle;
      else likelier = middle;
    }
    return Math.min(1, binomialAtMost(k, n, chance) + binomialAtLeast(noMore, n, chance));
  }
  let noMore = -1;
  let likelier = mode;
  while (likelier - noMore > 1) {
    const middle = Math.floor((likelier + noMore) / 2);
    if (binomialProbability(middle, n, chance) <= limit) noMore = middle;
    else likelier = middle;
  }
  return Math.min(1, binomialAtLeast(k, n, chance) + binomialAtMost(noMore, n, chance));
}
