import { logSumExp } from './log-sum-exp';

/** An E-value with its logarithm: the logarithm decides, the plain number is for people to read. */
export interface EValue {
  /** ln E, exact at any size. */
  readonly logE: number;
  /** E itself, held at the largest finite number where exp(ln E) would leave the range. */
  readonly e: number;
}

/** The plain number of a logarithm, never Infinity. */
export function eValue(logE: number): EValue {
  return { logE, e: Math.min(Math.exp(logE), Number.MAX_VALUE) };
}

/**
 * E of several bets held in equal parts: the mean of their products.
 *
 * @param logProducts ln of each bet's product, at least one.
 */
export function mixedBets(logProducts: readonly number[]): EValue {
  return eValue(logSumExp(logProducts) - Math.log(logProducts.length));
}
