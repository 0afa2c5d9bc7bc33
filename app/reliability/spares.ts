import { poissonQuantile } from './special-functions';

/**
 * Spares to hold for a lead time: the smallest s with P(demand ≤ s) ≥ the service level, demand Poisson.
 * Source: Barlow & Proschan 1965 (spare parts with constant rate).
 *
 * @param meanDemand failures expected within the lead time, at least 0.
 * @param serviceLevel in (0, 1).
 */
export function sparesNeeded(meanDemand: number, serviceLevel: number): number {
  if (!(meanDemand >= 0 && meanDemand < Infinity))
    throw new RangeError(`mean demand ${meanDemand} is not 0 or more`);
  if (!(serviceLevel > 0 && serviceLevel < 1))
    throw new RangeError(`service level ${serviceLevel} is not in (0, 1)`);
  return poissonQuantile(serviceLevel, meanDemand);
}
