import { assetHistories } from '~/reliability/asset-histories';
import { meanTimeInterval } from '~/reliability/exponential';
import { crowAmsaaSlope } from '~/reliability/crow-amsaa';
import { failuresToSettle } from '~/reliability/failures-to-settle';
import type { History } from '~/reliability/history';
import { laplaceTest } from '~/reliability/laplace';
import { lifeHistories, type LifeHistories } from '~/reliability/life-histories';
import { meanCumulativeFunction } from '~/reliability/mean-cumulative-function';
import { militaryHandbookTest } from '~/reliability/military-handbook';
import { nelsonAalen } from '~/reliability/nelson-aalen';
import { piecewiseHazard } from '~/reliability/piecewise-hazard';
import { pooledExposure, pooledExposureClock, type PooledExposure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { fitPowerLaw, type NoPowerLawFit, type PowerLawFit } from '~/reliability/power-law';
import { silenceChance } from '~/reliability/silence';
import type { CountInExposure } from '~/reliability/two-rates';
import { findAgeRank } from './age-rank-findings';
import { alarmFindings } from './advance-alarm-state';
import type { AlarmState } from './alarm-findings';
import type { ClassEvidence } from './class-evidence';
import { comparePeriods } from './compare-periods';
import { findModes } from './find-modes';
import { findScatter } from './find-scatter';
import type { FailureRate, Findings } from './findings';
import { forecast } from './forecast';
import { itemsInPlace } from './items-in-place';
import { estimateLife } from './life-estimates';
import { summariseLives } from './life-summary';
import { maskedAge, renewalHabits } from './masking';
import { priceSchedule } from './price-schedule';
import { toShapeFit } from './shape-fit';

const daysAYear = 365;
/** Of every two-sided interval shown. */
const confidence = 0.9;

/**
 * Estimates everything that an assessment of one class rests on. Pure: the same evidence gives the same
 * numbers to the last bit.
 *
 * @param alarmState what all failures so far add up to, for the alarms.
 * @throws InvalidHistoryError or RangeError where records that passed every check still make no history.
 */
export function computeFindings(evidence: ClassEvidence, alarmState: AlarmState): Findings {
  const { positions, rateOnlyPositions, clock, now } = evidence;
  // The first question takes in items whose ages cannot be told apart; the second cannot.
  const everyPosition = [...positions, ...rateOnlyPositions];
  const asset = assetHistories(everyPosition);
  const life = lifeHistories(positions);
  const pooled = pooledExposure(everyPosition);
  const exposureClock = pooledExposureClock(everyPosition);
  const slope = fitPowerLaw(asset.histories);
  const lifeFit = fitPowerLaw(life.histories);
  const yearAgo = now - daysAYear;
  const exposureBefore = Math.min(exposureClock(yearAgo), pooled.totalExposure);
  const rate = rateFindings(
    { failures: pooled.failures.filter(({ at }) => at < yearAgo).length, exposure: exposureBefore },
    { failures: pooled.failures.length, exposure: pooled.totalExposure },
  );
  const extent = extentOf(evidence, everyPosition, life);
  const renewals = renewalHabits(life);

  return {
    clock,
    extent,
    leftOut: evidence.leftOut.map(({ reason, count }) => ({ reason, count })),
    rate,
    trend: trendFindings(asset.histories, slope, pooled),
    life: lifeFindings(life),
    ageRank: ageRank(positions),
    renewals,
    modes: findModes(positions, evidence.modes),
    scatter: scatterFindings(evidence, everyPosition, {
      pooled,
      asset: { histories: asset.histories, slope: shapeOf(slope) },
      life: { histories: life.histories, shape: shapeOf(lifeFit) },
    }),
    schedule: priceSchedule({
      clock,
      fit: lifeFit,
      lives: summariseLives(life.histories),
      patchedShare: patchedShare(life),
      costs: evidence.costs,
      current: { interval: evidence.currentTask?.interval ?? null, task: evidence.currentTask?.name ?? null },
      positions: itemsInPlace(everyPosition, now).positions.length,
      unitsAYear: evidence.clockUnitsAYear,
      isGroup: evidence.groups.assets > 0,
      maskedAge: maskedAge({ extent, renewals }),
      hidden:
        evidence.hiddenFailures && evidence.requiredAvailability !== null && pooled.totalExposure > 0
          ? {
              requiredAvailability: evidence.requiredAvailability,
              failures: pooled.failures.length,
              exposure: pooled.totalExposure,
            }
          : null,
    }),
    forecast: forecast({
      positions: everyPosition,
      siteOf: (positionId) => evidence.places.get(positionId) ?? nowhere,
      now,
      overall: rate.overall,
      lastYear: rate.lastYear,
      fit: lifeFit,
      currentInterval: evidence.currentTask?.interval ?? null,
      leadTimeDays: evidence.sparesLeadTimeDays,
      serviceLevel: evidence.serviceLevel,
    }),
    alarms: alarmFindings(alarmState),
  };
}

function extentOf(
  evidence: ClassEvidence,
  everyPosition: readonly Position[],
  life: LifeHistories,
): Findings['extent'] {
  return {
    positions: everyPosition.length,
    rateOnlyPositions: evidence.rateOnlyPositions.length,
    groupFailures: evidence.groups.failures,
    undatedGroupFailures: evidence.groups.undatedFailures,
    positionsWithAssumedClock: evidence.positionsWithAssumedClock,
    watchedFrom: earliestWatch(everyPosition),
    now: evidence.now,
    plannedRenewals: countPlannedRenewals(everyPosition),
    lives: life.lives,
    livesEndedByFailure: life.livesEndedByFailure,
    livesEndedByPlannedRenewal: life.livesEndedByPlannedRenewal,
    livesLeftOut: life.livesLeftOut,
    livesDatedByRecord: life.datedByRecord,
    conflictingDates: life.conflictingDates,
    zeroLives: life.zeroLives,
  };
}

function rateFindings(before: CountInExposure, overall: CountInExposure): Findings['rate'] {
  const lastYear = {
    failures: overall.failures - before.failures,
    exposure: overall.exposure - before.exposure,
  };
  const comparison = comparePeriods(before, lastYear);
  return {
    overall: failureRate(overall.failures, overall.exposure),
    lastYear: failureRate(lastYear.failures, lastYear.exposure),
    lastYearAgainstBefore: comparison && {
      ratio: comparison.ratio,
      low: comparison.low,
      high: comparison.high,
      p: comparison.p,
    },
  };
}

function trendFindings(
  histories: readonly History[],
  slope: PowerLawFit | NoPowerLawFit,
  pooled: PooledExposure,
): Findings['trend'] {
  const laplace = laplaceTest(histories);
  const military = militaryHandbookTest(histories);
  const exactSlope = crowAmsaaSlope(histories);
  const perPosition = meanCumulativeFunction(histories, confidence).at(-1);
  const failureExposures = pooled.failures.map(({ exposure }) => exposure);
  return {
    laplace: laplace && { u: laplace.u, p: laplace.pTwoSided, failures: laplace.failures },
    militaryHandbook: military && {
      statistic: military.x,
      degreesOfFreedom: military.degreesOfFreedom,
      p: military.pTwoSided,
    },
    slope: toShapeFit(slope, 'on record'),
    exactSlopeInterval: exactSlope && { ...exactSlope.interval },
    failuresPerPosition:
      perPosition === undefined
        ? null
        : { age: perPosition.time, value: perPosition.mean, low: perPosition.lower, high: perPosition.upper },
    failureExposures,
    totalExposure: pooled.totalExposure,
    silence: silence(failureExposures, pooled.totalExposure),
  };
}

function lifeFindings(life: LifeHistories): Findings['life'] {
  const estimates = estimateLife(life.histories);
  const { fit } = estimates;
  const { bands, longestAge } = piecewiseHazard(life.histories);
  const settle = failuresToSettle(fit.failures, fit.kind === 'fit' ? fit.lnShapeStandardError : null);
  const hazard = nelsonAalen(life.histories, confidence).at(-1);
  return {
    ...estimates,
    cumulativeHazard:
      hazard === undefined
        ? null
        : { age: hazard.age, value: hazard.cumulativeHazard, low: hazard.low, high: hazard.high },
    hazardBands: bands.map((band) => ({ ...band })),
    longestAge,
    failuresToSettle: life.histories.length === 0 ? null : { total: settle.total, more: settle.more },
  };
}

function ageRank(positions: readonly Position[]): Findings['ageRank'] {
  const { findings, marks } = findAgeRank(positions);
  return { ...findings, marks: marks.map(({ share, size, at }) => ({ share, peers: size, at })) };
}

const nowhere = { tag: 'not known', siteId: '', siteName: 'not known' };

function scatterFindings(
  { places, visits, groups }: ClassEvidence,
  positions: readonly Position[],
  fits: Pick<Parameters<typeof findScatter>[0], 'pooled' | 'asset' | 'life'>,
): Findings['scatter'] {
  return findScatter({
    positions,
    placeOf: (positionId) => places.get(positionId) ?? nowhere,
    visitsOf: (positionId) => visits.get(positionId) ?? [],
    groups: {
      assets: groups.assets,
      items: groups.items,
      itemsOfUnknownAge: groups.itemsOfUnknownAge,
    },
    ...fits,
  });
}

function failureRate(failures: number, exposure: number): FailureRate {
  if (exposure <= 0) {
    return { failures, exposure: 0, meanTime: null, meanTimeInterval: { low: null, high: null } };
  }
  return {
    failures,
    exposure,
    meanTime: failures === 0 ? null : exposure / failures,
    meanTimeInterval: { ...meanTimeInterval(failures, exposure) },
  };
}

/** The rate is taken up to the last failure, so that the silence does not talk it down. */
function silence(failureExposures: readonly number[], total: number): Findings['trend']['silence'] {
  const last = failureExposures.at(-1);
  if (last === undefined) return null;
  return {
    exposure: total - last,
    chance: silenceChance(failureExposures.length / last, total - last),
  };
}

/** A life's last failure renewed the item where it ended the life; all others were patched. */
function patchedShare({ histories, livesEndedByFailure }: LifeHistories): number {
  const failures = histories.reduce((sum, history) => sum + history.failures.length, 0);
  return failures === 0 ? 0 : 1 - livesEndedByFailure / failures;
}

function shapeOf(fit: PowerLawFit | NoPowerLawFit): number | null {
  return fit.kind === 'fit' ? fit.shape : null;
}

function earliestWatch(positions: readonly Position[]): number | null {
  const earliest = positions.reduce((least, { watchFrom }) => Math.min(least, watchFrom), Infinity);
  return Number.isFinite(earliest) ? earliest : null;
}

function countPlannedRenewals(positions: readonly Position[]): number {
  const within = ({ events, watchFrom, watchTo }: Position) =>
    events.filter(({ at, kind }) => kind === 'planned-renewal' && at >= watchFrom && at <= watchTo);
  return positions.reduce((sum, position) => sum + within(position).length, 0);
}
