import { poissonCdf, regularizedBeta } from './special-functions';

/** Means are averaged into this many equal parts before any sum: the quantiles move by less than a count, the work by a factor of ten. */
const parts = 40;

/** So near to 1 a dispersion makes no difference. */
const asGoodAsPoisson = 0.01;

/**
 * A count given its mean, the mean being equally likely to be any of a list: scatter and what is not known
 * of the rate in one distribution.
 *
 * The scatter is Poisson where variance and mean are equal. Where ages matter they are not: items that wear
 * out fail more evenly than that, items that fail young less. Then it is the binomial or the negative
 * binomial law of that mean and variance (common practice, no source), their cdf by the incomplete beta
 * function, which needs no whole number of trials.
 */
export class CountMixture {
  readonly #means: readonly number[];
  readonly #dispersion: number;

  /**
   * @param means at least one, each finite and at least 0.
   * @param dispersion variance over mean of the count given its mean, above 0.
   */
  constructor(means: readonly number[], dispersion = 1) {
    if (means.length === 0 || !means.every((mean) => mean >= 0 && mean < Infinity)) {
      throw new RangeError('a mixture needs means, finite and at least 0');
    }
    if (!(dispersion > 0 && dispersion < Infinity)) {
      throw new RangeError(`a dispersion of ${dispersion} is not above 0`);
    }
    this.#means = condense([...means].sort((a, b) => a - b));
    this.#dispersion = dispersion;
  }

  /** P(X ≤ k). */
  cdf(k: number): number {
    let sum = 0;
    for (const mean of this.#means) sum += countCdf(k, mean, this.#dispersion);
    return sum / this.#means.length;
  }

  /** Smallest k with P(X ≤ k) ≥ p, for p in (0, 1). */
  quantile(p: number): number {
    if (!(p > 0 && p < 1)) throw new RangeError(`p ${p} is not in (0, 1)`);
    let below = -1;
    let reach = 1;
    while (this.cdf(below + reach) < p) {
      below += reach;
      reach *= 2;
    }
    let atLeast = below + reach;
    while (atLeast - below > 1) {
      const middle = Math.floor((below + atLeast) / 2);
      if (this.cdf(middle) >= p) atLeast = middle;
      else below = middle;
    }
    return atLeast;
  }
}

function countCdf(k: number, mean: number, dispersion: number): number {
  if (mean === 0) return 1;
  if (Math.abs(dispersion - 1) < asGoodAsPoisson) return poissonCdf(k, mean);
  if (dispersion > 1) return regularizedBeta(1 / dispersion, mean / (dispersion - 1), k + 1);
  const trials = mean / (1 - dispersion);
  return k >= trials ? 1 : regularizedBeta(dispersion, trials - k, k + 1);
}

function condense(sorted: readonly number[]): readonly number[] {
  if (sorted.length <= parts || sorted.length % parts !== 0) return sorted;
  const size = sorted.length / parts;
  return Array.from({ length: parts }, (_, part) => {
    const slice = sorted.slice(part * size, (part + 1) * size);
    return slice.reduce((sum, mean) => sum + mean, 0) / size;
  });
}
