import type { ExponentialFit } from './exponential';
import type { PowerLawFit } from './power-law';
import { chiSquaredUpperTail, normalUpperTail } from './special-functions';

/** Likelihood-ratio test of β = 1 (constant hazard) against the power law. */
export interface LikelihoodRatio {
  /** 2 (ln L at β̂ − ln L at β = 1), on 1 degree of freedom. */
  readonly statistic: number;
  readonly pTwoSided: number;
  /** Signed root of the statistic: above 0 where β̂ > 1. Near N(0, 1) under a constant hazard. */
  readonly signedRoot: number;
  /** One-sided p against wear-out: small where β̂ lies well above 1. */
  readonly pWearOut: number;
}

/**
 * @param fit the power-law fit; @param exponential the constant rate fitted to the same histories.
 *
 * Source: Nelson 1982, chapter 12; Barndorff-Nielsen & Cox 1994 (signed root).
 */
export function likelihoodRatio(fit: PowerLawFit, exponential: ExponentialFit): LikelihoodRatio {
  const statistic = Math.max(0, 2 * (fit.logLikelihood - exponential.logLikelihood));
  const signedRoot = Math.sign(fit.shape - 1) * Math.sqrt(statistic);
  return {
    statistic,
    pTwoSided: chiSquaredUpperTail(statistic, 1),
    signedRoot,
    pWearOut: normalUpperTail(signedRoot),
  };
}
