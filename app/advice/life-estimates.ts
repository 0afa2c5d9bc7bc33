import { z } from 'zod';
import { fitExponential } from '~/reliability/exponential';
import type { History } from '~/reliability/history';
import { lifeIntervals } from '~/reliability/life-intervals';
import { likelihoodRatio } from '~/reliability/likelihood-ratio';
import { fitPowerLaw } from '~/reliability/power-law';
import { weibullB10, weibullMeanLife } from '~/reliability/weibull';
import { openIntervalSchema, shapeFitSchema, toShapeFit } from './shape-fit';

/** A life with its 90 % interval, in clock units; null where it cannot be had. */
const lifeEstimateSchema = z.object({ value: z.number(), interval: openIntervalSchema }).nullable();
export type LifeEstimate = z.infer<typeof lifeEstimateSchema>;

export const lifeEstimatesSchema = z.object({
  fit: shapeFitSchema,
  /** Likelihood-ratio test of shape 1; pWearOut is one-sided against shape > 1. */
  memorylessTest: z.object({ statistic: z.number(), p: z.number(), pWearOut: z.number() }).nullable(),
  /** Mean life, and the age by which one in ten has failed. */
  meanLife: lifeEstimateSchema,
  tenthGone: lifeEstimateSchema,
});
export type LifeEstimates = z.infer<typeof lifeEstimatesSchema>;

/** What histories on the life clock say of the life of their items. */
export function estimateLife(histories: readonly History[]): LifeEstimates {
  const fit = fitPowerLaw(histories);
  const exponential = fitExponential(histories);
  if (fit.kind === 'cannot-be-estimated' || exponential === null) {
    return { fit: toShapeFit(fit, 'of known age'), memorylessTest: null, meanLife: null, tenthGone: null };
  }
  const test = likelihoodRatio(fit, exponential);
  const intervals = lifeIntervals(histories, fit);
  return {
    fit: toShapeFit(fit, 'of known age'),
    memorylessTest: { statistic: test.statistic, p: test.pTwoSided, pWearOut: test.pWearOut },
    meanLife: estimate(weibullMeanLife(fit), intervals.meanLife),
    tenthGone: estimate(weibullB10(fit), intervals.tenthGone),
  };
}

function estimate(value: number, { low, high }: { low: number | null; high: number | null }): LifeEstimate {
  return Number.isFinite(value) ? { value, interval: { low, high } } : null;
}
