import { binomialQuantile } from './special-functions';

/** Where the cumulative count may run, at one share of the exposure, if the rate is constant. */
export interface ConstantRateBandPoint {
  /** Share of the total exposure gone, 0 to 1. */
  readonly share: number;
  readonly low: number;
  readonly high: number;
}

/**
 * Pointwise band for the cumulative count of failures against pooled exposure under a constant rate, given
 * how many there were in all: at share x of the exposure the count is binomial (n, x).
 *
 * @param failures all failures seen; @param shares where to give the band, each in [0, 1].
 *
 * Source: the conditional uniformity of a Poisson process (Cox & Lewis 1966, 2.1).
 */
export function constantRateBand(
  failures: number,
  shares: readonly number[],
  level = 0.9,
): ConstantRateBandPoint[] {
  const tail = (1 - level) / 2;
  return shares.map((share) => ({
    share,
    low: binomialQuantile(tail, failures, share),
    high: binomialQuantile(1 - tail, failures, share),
  }));
}
