import { ageRankTest } from '~/reliability/age-rank';
import { assetHistories } from '~/reliability/asset-histories';
import { fitExponential, meanTimeInterval } from '~/reliability/exponential';
import { failuresToSettle } from '~/reliability/failures-to-settle';
import { totalExposure, type History } from '~/reliability/history';
import { laplaceTest } from '~/reliability/laplace';
import { lifeHistories, type LifeHistories } from '~/reliability/life-histories';
import { likelihoodRatio } from '~/reliability/likelihood-ratio';
import { militaryHandbookTest } from '~/reliability/military-handbook';
import { piecewiseHazard } from '~/reliability/piecewise-hazard';
import { pooledExposure, pooledExposureClock } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { fitPowerLaw, type NoPowerLawFit, type PowerLawFit } from '~/reliability/power-law';
import { silenceChance } from '~/reliability/silence';
import { weibullB10, weibullMeanLife } from '~/reliability/weibull';
import type { ClassEvidence } from './class-evidence';
import type { FailureRate, Findings, ShapeFit } from './findings';
import { noFitSentence } from './no-fit-sentence';

const daysAYear = 365;

/**
 * Estimates everything that an assessment of one class rests on. Pure: the same evidence gives the same
 * numbers to the last bit.
 *
 * @throws InvalidHistoryError or RangeError where records that passed every check still make no history.
 */
export function computeFindings(evidence: ClassEvidence): Findings {
  const { positions, clock, now } = evidence;
  // The first question takes in items whose ages cannot be told apart; the second cannot.
  const everyPosition = [...positions, ...evidence.rateOnlyPositions];
  const asset = assetHistories(everyPosition);
  const life = lifeHistories(positions);
  const pooled = pooledExposure(everyPosition);
  const exposureClock = pooledExposureClock(everyPosition);
  const renewalAge = upperQuartile(life.plannedRenewalAges);
  const yearAgo = now - daysAYear;

  return {
    clock,
    extent: {
      positions: everyPosition.length,
      rateOnlyPositions: evidence.rateOnlyPositions.length,
      groupItems: evidence.groups.items,
      groupFailures: evidence.groups.failures,
      undatedGroupFailures: evidence.groups.undatedFailures,
      positionsWithAssumedClock: evidence.positionsWithAssumedClock,
      watchedFrom: earliestWatch(everyPosition),
      now,
      plannedRenewals: countPlannedRenewals(everyPosition),
      lives: life.lives,
      livesEndedByFailure: life.livesEndedByFailure,
      livesEndedByPlannedRenewal: life.livesEndedByPlannedRenewal,
      livesLeftOut: life.livesLeftOut,
      livesDatedByRecord: life.datedByRecord,
      conflictingDates: life.conflictingDates,
      zeroLives: life.zeroLives,
    },
    leftOut: evidence.leftOut.map(({ reason, count }) => ({ reason, count })),
    rate: {
      overall: failureRate(pooled.failures.length, pooled.totalExposure),
      lastYear: failureRate(
        pooled.failures.filter(({ at }) => at >= yearAgo).length,
        pooled.totalExposure - Math.min(exposureClock(yearAgo), pooled.totalExposure),
      ),
    },
    trend: {
      ...trendTests(asset.histories),
      slope: shapeFit(fitPowerLaw(asset.histories), 'on record'),
      failureExposures: pooled.failures.map(({ exposure }) => exposure),
      totalExposure: pooled.totalExposure,
      silence: silence(
        pooled.failures.map(({ exposure }) => exposure),
        pooled.totalExposure,
      ),
    },
    life: lifeFindings(life),
    ageRank: ageRank(positions),
    schedule: {
      usualRenewalAge: renewalAge,
      exposureBeyondUsualAge: renewalAge === null ? 0 : exposureBeyond(life.histories, renewalAge),
      lifeExposure: totalExposure(life.histories),
    },
  };
}

function trendTests(histories: readonly History[]): Pick<Findings['trend'], 'laplace' | 'militaryHandbook'> {
  const laplace = laplaceTest(histories);
  const military = militaryHandbookTest(histories);
  return {
    laplace: laplace && { u: laplace.u, p: laplace.pTwoSided, failures: laplace.failures },
    militaryHandbook: military && {
      statistic: military.x,
      degreesOfFreedom: military.degreesOfFreedom,
      p: military.pTwoSided,
    },
  };
}

function shapeFit(fit: PowerLawFit | NoPowerLawFit, which: string): ShapeFit {
  if (fit.kind === 'cannot-be-estimated') {
    const failures = 'failures' in fit.reason ? fit.reason.failures : 0;
    return { kind: fit.kind, reason: noFitSentence(fit.reason, which), failures };
  }
  return {
    kind: 'fit',
    shape: fit.shape,
    scale: fit.scale,
    shapeInterval: { low: fit.interval.low, high: fit.interval.high },
    lnShapeStandardError: fit.lnShapeStandardError,
    logLikelihood: fit.logLikelihood,
    failures: fit.failures,
  };
}

function lifeFindings(life: LifeHistories): Findings['life'] {
  const { histories } = life;
  const powerLaw = fitPowerLaw(histories);
  const fit = shapeFit(powerLaw, 'of known age');
  const exponential = fitExponential(histories);
  const test =
    powerLaw.kind === 'fit' && exponential !== null ? likelihoodRatio(powerLaw, exponential) : null;
  const { bands, longestAge } = piecewiseHazard(histories);
  const settle = failuresToSettle(fit.failures, fit.kind === 'fit' ? fit.lnShapeStandardError : null);
  return {
    fit,
    memorylessTest: test && { statistic: test.statistic, p: test.pTwoSided, pWearOut: test.pWearOut },
    meanLife: powerLaw.kind === 'fit' ? finiteOrNull(weibullMeanLife(powerLaw)) : null,
    tenthGone: powerLaw.kind === 'fit' ? finiteOrNull(weibullB10(powerLaw)) : null,
    hazardBands: bands.map((band) => ({ ...band })),
    longestAge,
    failuresToSettle: histories.length === 0 ? null : { total: settle.total, more: settle.more },
  };
}

function ageRank(positions: readonly Position[]): Findings['ageRank'] {
  const test = ageRankTest(positions);
  const withPeers = test.marks.filter(({ size }) => size > 1);
  const youngerPeers = withPeers.map(({ share, size }) => (share * size - 0.5) / (size - 1));
  return {
    marks: test.marks.map(({ share, size, at, positionId }) => ({ share, peers: size, at, positionId })),
    meanShare: test.meanShare,
    meanYoungerPeers: withPeers.length === 0 ? null : mean(youngerPeers),
    z: test.z,
    p: test.pTwoSided,
    weightless: test.weightless,
    ageUnknown: test.unknownAge,
  };
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

function earliestWatch(positions: readonly Position[]): number | null {
  const earliest = positions.reduce((least, { watchFrom }) => Math.min(least, watchFrom), Infinity);
  return finiteOrNull(earliest);
}

function countPlannedRenewals(positions: readonly Position[]): number {
  const within = ({ events, watchFrom, watchTo }: Position) =>
    events.filter(({ at, kind }) => kind === 'planned-renewal' && at >= watchFrom && at <= watchTo);
  return positions.reduce((sum, position) => sum + within(position).length, 0);
}

function exposureBeyond(histories: readonly History[], age: number): number {
  return histories.reduce((sum, { entry, exit }) => sum + Math.max(0, exit - Math.max(entry, age)), 0);
}

function upperQuartile(ages: readonly number[]): number | null {
  const sorted = Float64Array.from(ages).sort();
  return sorted[Math.ceil(0.75 * sorted.length) - 1] ?? null;
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
