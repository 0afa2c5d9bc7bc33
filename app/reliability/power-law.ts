import { findRoot } from './find-root';
import type { History } from './history';
import { PowerLawProfile } from './power-law-profile';
import { chiSquaredQuantile } from './special-functions';

/** Slopes outside this range are not believed: the search ends there. */
export const shapeSearch = { lowest: 1e-3, highest: 1e3 } as const;

/** An interval whose end is null where the likelihood does not bound it within the search. */
export interface ShapeInterval {
  readonly low: number | null;
  readonly high: number | null;
}

/** A fitted power-law hazard h(t) = (β/η)(t/η)^(β−1): a Weibull life, or a power-law process by age. */
export interface PowerLawFit {
  readonly kind: 'fit';
  /** β. Biased high when failures are few: quote `failures` beside it. */
  readonly shape: number;
  /** η, in the unit of the histories. */
  readonly scale: number;
  readonly logLikelihood: number;
  readonly failures: number;
  readonly lnShapeStandardError: number;
  /** Asymptotic covariance of (ln β, ln η), from the observed information. */
  readonly covariance: { readonly lnShape: number; readonly lnScale: number; readonly cross: number };
  /** Two-sided profile-likelihood interval for β at `level`. */
  readonly interval: ShapeInterval;
  readonly level: number;
}

/** Why a power law could not be fitted. */
export type NoFitReason =
  | { readonly code: 'no-failures' }
  /** Every failure at the longest age reached: no finite slope is steep enough. */
  | { readonly code: 'failures-only-at-the-end'; readonly failures: number; readonly age: number }
  /** The likelihood still grows at the lower end of the search (only late entries can do this). */
  | { readonly code: 'slope-below-search'; readonly failures: number; readonly lowestShape: number }
  /** The likelihood still grows at the upper end of the search: failures almost all at one age. */
  | { readonly code: 'slope-above-search'; readonly failures: number; readonly highestShape: number };

export interface NoPowerLawFit {
  readonly kind: 'cannot-be-estimated';
  readonly reason: NoFitReason;
}

/**
 * Fits the power-law hazard by maximum likelihood, late entries and right-censoring included, with the
 * profile-likelihood interval for the slope. One function serves both clocks.
 *
 * @param histories valid histories in one unit (any: times are scaled by the largest exit first).
 * @param options.level two-sided level of the interval, 0.9 unless given.
 *
 * Sources: Crow 1975 (AMSAA TR-138); Nelson 1982; Meeker & Escobar 1998 (profile intervals, chapter 8).
 */
export function fitPowerLaw(
  histories: readonly History[],
  { level = 0.9 }: { level?: number } = {},
): PowerLawFit | NoPowerLawFit {
  const profile = new PowerLawProfile(histories);
  const { failures } = profile;
  if (failures === 0) return noFit({ code: 'no-failures' });
  if (profile.allFailuresAtLargestExit) {
    const age = histories.reduce((largest, { exit }) => Math.max(largest, exit), 0);
    return noFit({ code: 'failures-only-at-the-end', failures, age });
  }
  const lowest = Math.log(shapeSearch.lowest);
  const highest = Math.log(shapeSearch.highest);
  if (!(profile.at(lowest).score > 0)) {
    return noFit({ code: 'slope-below-search', failures, lowestShape: shapeSearch.lowest });
  }
  if (!(profile.at(highest).score < 0)) {
    return noFit({ code: 'slope-above-search', failures, highestShape: shapeSearch.highest });
  }

  const lnShape = findRoot((x) => profile.at(x).score, lowest, highest);
  const best = profile.at(lnShape);
  const lnShapeVariance = 1 / best.information;
  const shape = Math.exp(lnShape);
  return {
    kind: 'fit',
    shape,
    scale: Math.exp(best.lnScale),
    logLikelihood: best.logLikelihood,
    failures,
    lnShapeStandardError: Math.sqrt(lnShapeVariance),
    covariance: {
      lnShape: lnShapeVariance,
      lnScale: 1 / (failures * shape * shape) + best.lnScaleSlope ** 2 * lnShapeVariance,
      cross: best.lnScaleSlope * lnShapeVariance,
    },
    interval: profileInterval(profile, lnShape, level),
    level,
  };
}

/** Where twice the fall of the profile log-likelihood reaches the chi-squared quantile on 1 df. */
function profileInterval(profile: PowerLawProfile, lnShape: number, level: number): ShapeInterval {
  const top = profile.at(lnShape);
  const drop = chiSquaredQuantile(level, 1) / 2;
  const above = (x: number) => profile.at(x).logLikelihood - top.logLikelihood + drop;
  const standardError = 1 / Math.sqrt(top.information);

  const end = (direction: 1 | -1): number | null => {
    const edge = Math.log(direction > 0 ? shapeSearch.highest : shapeSearch.lowest);
    let inside = lnShape;
    for (let reach = 2 * standardError; ; reach *= 2) {
      const outside = direction > 0 ? Math.min(edge, lnShape + reach) : Math.max(edge, lnShape - reach);
      if (above(outside) < 0) return Math.exp(findRoot(above, inside, outside));
      if (outside === edge) return null;
      inside = outside;
    }
  };
  return { low: end(-1), high: end(1) };
}

function noFit(reason: NoFitReason): NoPowerLawFit {
  return { kind: 'cannot-be-estimated', reason };
}
