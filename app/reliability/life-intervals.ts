import type { History } from './history';
import type { PowerLawFit } from './power-law';
import { PowerLawProfile } from './power-law-profile';
import { chiSquaredQuantile, logGamma } from './special-functions';

/** An end is null where the likelihood does not bound it, or no number holds it. */
export interface LifeInterval {
  readonly low: number | null;
  readonly high: number | null;
}

export interface LifeIntervals {
  /** MTTF, η Γ(1 + 1/β). */
  readonly meanLife: LifeInterval;
  /** B10, the age by which one in ten has failed. */
  readonly tenthGone: LifeInterval;
}

const unbounded: LifeInterval = { low: null, high: null };

/**
 * Two-sided profile-likelihood intervals, at the fit's own level, for the mean life and the B10 life of a
 * fitted Weibull.
 *
 * The profile-likelihood interval of a function g(β, η) is the range of g over the region where twice the
 * fall of the log-likelihood stays within the chi-squared quantile on 1 df. For one β that region is
 * r − 1 − ln r ≤ d, with r = (η̂(β)/η)^β and n d what the profile of β leaves of the allowed fall, so that
 * both ends of ln η are known and only β is searched. Unlike the delta method it needs no symmetry, which
 * matters most for the mean life under heavy censoring.
 *
 * Source: Meeker & Escobar 1998, sections 8.3 and 8.4 (likelihood intervals for functions of the parameters).
 *
 * @param histories those that `fit` was made from.
 */
export function lifeIntervals(histories: readonly History[], fit: PowerLawFit): LifeIntervals {
  const { low, high } = fit.interval;
  if (low === null || high === null) return { meanLife: unbounded, tenthGone: unbounded };
  const profile = smoothProfile(new PowerLawProfile(histories), Math.log(low), Math.log(high));
  const allowed = fit.logLikelihood - chiSquaredQuantile(fit.level, 1) / 2;

  const extreme = (direction: 1 | -1, lnOfUnitScale: (shape: number) => number): number | null => {
    const lnValue = (lnShape: number): number => {
      const { logLikelihood, lnScale } = profile(lnShape);
      const left = Math.max(0, (logLikelihood - allowed) / fit.failures);
      const shape = Math.exp(lnShape);
      return lnScale - lnRatioWithin(left, direction) / shape + lnOfUnitScale(shape);
    };
    const end = Math.exp(direction * highestOf((x) => direction * lnValue(x), Math.log(low), Math.log(high)));
    return end > 0 && end < Infinity ? end : null;
  };
  const range = (lnOfUnitScale: (shape: number) => number): LifeInterval => ({
    low: extreme(-1, lnOfUnitScale),
    high: extreme(1, lnOfUnitScale),
  });
  return {
    meanLife: range((shape) => logGamma(1 + 1 / shape)),
    tenthGone: range((shape) => Math.log(-Math.log1p(-0.1)) / shape),
  };
}

/** Points at which the profile is computed; between them it is smooth enough to lose no digit that is shown. */
const nodes = 33;

/**
 * The profile's log-likelihood and ln scale as functions of ln β on [low, high], from values at Chebyshev
 * points: one pass over the histories a point instead of one a step of four searches.
 *
 * Source: Berrut & Trefethen 2004 (barycentric interpolation, second kind).
 */
function smoothProfile(profile: PowerLawProfile, low: number, high: number) {
  const points = Array.from({ length: nodes }, (_, index) => {
    const at = (low + high) / 2 + ((high - low) / 2) * Math.cos((Math.PI * index) / (nodes - 1));
    const sign = index % 2 === 0 ? 1 : -1;
    const { logLikelihood, lnScale } = profile.at(at);
    return { at, weight: index === 0 || index === nodes - 1 ? sign / 2 : sign, logLikelihood, lnScale };
  });
  return (lnShape: number): { logLikelihood: number; lnScale: number } => {
    let [weights, logLikelihood, lnScale] = [0, 0, 0];
    for (const point of points) {
      if (point.at === lnShape) return point;
      const weight = point.weight / (lnShape - point.at);
      weights += weight;
      logLikelihood += weight * point.logLikelihood;
      lnScale += weight * point.lnScale;
    }
    return { logLikelihood: logLikelihood / weights, lnScale: lnScale / weights };
  };
}

/**
 * The x = ln r with r − 1 − ln r = d: below 0 (a longer scale) for direction 1, above 0 for −1. Newton's
 * steps start outside the root of a convex function and fall onto it.
 */
function lnRatioWithin(d: number, direction: 1 | -1): number {
  if (d === 0) return 0;
  let x = direction === 1 ? -(d + Math.sqrt(2 * d)) : Math.sqrt(2 * d);
  for (let step = 0; step < 60; step += 1) {
    const next = x - (Math.expm1(x) - x - d) / Math.expm1(x);
    if (!(Math.abs(next - x) > 1e-13 * Math.abs(x))) return next;
    x = next;
  }
  return x;
}

/** Largest value of a function with one peak on [low, high], by golden-section search. */
function highestOf(value: (at: number) => number, low: number, high: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  const narrow = 1e-5 * (high - low);
  let [left, right] = [high - golden * (high - low), low + golden * (high - low)];
  let [atLeft, atRight] = [value(left), value(right)];
  while (high - low > narrow) {
    if (atLeft > atRight) {
      [high, right, atRight] = [right, left, atLeft];
      left = high - golden * (high - low);
      atLeft = value(left);
    } else {
      [low, left, atLeft] = [left, right, atRight];
      right = low + golden * (high - low);
      atRight = value(right);
    }
  }
  return Math.max(atLeft, atRight);
}
