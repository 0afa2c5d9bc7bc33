import { countFailures, totalExposure, type History } from './history';
import { chiSquaredQuantile } from './special-functions';

/** A constant rate fitted to histories. */
export interface ExponentialFit {
  /** θ = exposure / failures, the mean time between failures, in the unit of the histories. */
  readonly meanTime: number;
  readonly logLikelihood: number;
  readonly failures: number;
  readonly exposure: number;
}

/** Fits a constant rate by maximum likelihood: θ = T/r, ln L = −r ln θ − r. Null without failures. */
export function fitExponential(histories: readonly History[]): ExponentialFit | null {
  const failures = countFailures(histories);
  if (failures === 0) return null;
  const exposure = totalExposure(histories);
  const meanTime = exposure / failures;
  return { meanTime, logLikelihood: -failures * (Math.log(meanTime) + 1), failures, exposure };
}

export interface RateInterval {
  readonly low: number;
  readonly high: number;
}

/**
 * Exact two-sided interval for a constant rate, `failures` seen in `exposure` (> 0), per unit of exposure:
 * [χ²(α/2; 2r)/2T, χ²(1−α/2; 2r+2)/2T]; the low end is 0 with no failure.
 *
 * Source: Garwood 1936.
 */
export function rateInterval(failures: number, exposure: number, level = 0.9): RateInterval {
  const tail = (1 - level) / 2;
  return {
    low: failures === 0 ? 0 : chiSquaredQuantile(tail, 2 * failures) / (2 * exposure),
    high: chiSquaredQuantile(1 - tail, 2 * failures + 2) / (2 * exposure),
  };
}

/** Interval for a mean time between failures; without failures it has no upper end. */
export interface MeanTimeInterval {
  readonly low: number;
  readonly high: number | null;
}

/**
 * Two-sided interval for the mean time between failures from a time-terminated watch, r failures in
 * exposure T: [2T/χ²(1−α/2; 2r+2), 2T/χ²(α/2; 2r)], in the unit of the exposure; exact for one Poisson
 * count. Source: Epstein & Sobel 1953; IEC 60605-4.
 */
export function meanTimeInterval(failures: number, exposure: number, level = 0.9): MeanTimeInterval {
  const { low, high } = rateInterval(failures, exposure, level);
  return { low: 1 / high, high: failures === 0 ? null : 1 / low };
}
