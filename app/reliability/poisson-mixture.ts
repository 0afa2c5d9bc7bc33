import { poissonCdf } from './special-functions';

/** Means are averaged into this many equal parts before any sum: the quantiles move by less than a count, the work by a factor of ten. */
const parts = 40;

/**
 * A count that is Poisson given its mean, the mean being equally likely to be any of a list: Poisson
 * scatter and what is not known of the rate in one distribution.
 */
export class PoissonMixture {
  readonly #means: readonly number[];

  /** @param means at least one, each finite and at least 0. */
  constructor(means: readonly number[]) {
    if (means.length === 0 || !means.every((mean) => mean >= 0 && mean < Infinity)) {
      throw new RangeError('a mixture needs means, finite and at least 0');
    }
    this.#means = condense([...means].sort((a, b) => a - b));
  }

  /** P(X ≤ k). */
  cdf(k: number): number {
    let sum = 0;
    for (const mean of this.#means) sum += poissonCdf(k, mean);
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

function condense(sorted: readonly number[]): readonly number[] {
  if (sorted.length <= parts || sorted.length % parts !== 0) return sorted;
  const size = sorted.length / parts;
  return Array.from({ length: parts }, (_, part) => {
    const slice = sorted.slice(part * size, (part + 1) * size);
    return slice.reduce((sum, mean) => sum + mean, 0) / size;
  });
}
