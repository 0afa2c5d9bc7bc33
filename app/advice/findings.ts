import { z } from 'zod';
import { leftOutReasons } from './class-evidence';

/**
 * The estimates of one class on one night, before any judgement: numbers only, as they are stored.
 *
 * Ages and exposures are in the class's clock unit, moments are day numbers. Where a number cannot be
 * had, the field says why instead of holding a stand-in.
 */

/** An end that the data leave open is null. */
const openInterval = z.object({ low: z.number().nullable(), high: z.number().nullable() });

const shapeFit = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('fit'),
    shape: z.number(),
    scale: z.number(),
    shapeInterval: openInterval,
    /** Standard error of ln shape. */
    lnShapeStandardError: z.number(),
    logLikelihood: z.number(),
    failures: z.number().int(),
  }),
  z.object({ kind: z.literal('cannot-be-estimated'), reason: z.string(), failures: z.number().int() }),
]);
export type ShapeFit = z.infer<typeof shapeFit>;

/** Failures in an exposure, and the mean time between them with its 90 % interval. */
const failureRate = z.object({
  failures: z.number().int(),
  exposure: z.number(),
  /** Null without a failure: then only the lower end is known. */
  meanTime: z.number().nullable(),
  meanTimeInterval: z.object({ low: z.number().nullable(), high: z.number().nullable() }),
});
export type FailureRate = z.infer<typeof failureRate>;

const hazardBand = z.object({
  from: z.number(),
  to: z.number(),
  failures: z.number().int(),
  exposure: z.number(),
  rate: z.number(),
  low: z.number(),
  high: z.number(),
});

export const findingsSchema = z.object({
  clock: z.enum(['calendar-days', 'operating-hours']),
  extent: z.object({
    positions: z.number().int(),
    /** Of these, items of quantity assets whose ages cannot be told apart. */
    rateOnlyPositions: z.number().int(),
    groupItems: z.number().int(),
    groupFailures: z.number().int(),
    undatedGroupFailures: z.number().int(),
    positionsWithAssumedClock: z.number().int(),
    /** First day under watch of any position; null when none is. */
    watchedFrom: z.number().nullable(),
    now: z.number(),
    plannedRenewals: z.number().int(),
    lives: z.number().int(),
    livesEndedByFailure: z.number().int(),
    livesEndedByPlannedRenewal: z.number().int(),
    /** First lives whose item's age nobody knows. */
    livesLeftOut: z.number().int(),
    livesDatedByRecord: z.number().int(),
    conflictingDates: z.number().int(),
    zeroLives: z.number().int(),
  }),
  leftOut: z.array(z.object({ reason: z.enum(leftOutReasons), count: z.number().int() })),
  rate: z.object({ overall: failureRate, lastYear: failureRate }),
  trend: z.object({
    laplace: z.object({ u: z.number(), p: z.number(), failures: z.number().int() }).nullable(),
    militaryHandbook: z
      .object({ statistic: z.number(), degreesOfFreedom: z.number().int(), p: z.number() })
      .nullable(),
    slope: shapeFit,
    /** Where on the pooled exposure clock each failure stands, ascending. */
    failureExposures: z.array(z.number()),
    totalExposure: z.number(),
    /** Exposure since the last failure, or since the start when there was none, and its chance at the fitted rate. */
    silence: z.object({ exposure: z.number(), chance: z.number() }).nullable(),
  }),
  life: z.object({
    fit: shapeFit,
    /** Likelihood-ratio test of shape 1; pWearOut is one-sided against shape > 1. */
    memorylessTest: z.object({ statistic: z.number(), p: z.number(), pWearOut: z.number() }).nullable(),
    /** Median life and the age by which one in ten has failed, in clock units. */
    meanLife: z.number().nullable(),
    tenthGone: z.number().nullable(),
    hazardBands: z.array(hazardBand),
    longestAge: z.number(),
    failuresToSettle: z.object({ total: z.number().int(), more: z.number().int() }).nullable(),
  }),
  ageRank: z.object({
    /** One mark a failure, in order of time: rank share, peers under watch, moment, the asset it happened to. */
    marks: z.array(
      z.object({
        share: z.number(),
        peers: z.number().int(),
        at: z.number(),
        positionId: z.string(),
      }),
    ),
    meanShare: z.number().nullable(),
    /** The share of the others that were younger, on average; what "older than 78 % of the others" says. */
    meanYoungerPeers: z.number().nullable(),
    z: z.number().nullable(),
    p: z.number().nullable(),
    weightless: z.number().int(),
    ageUnknown: z.number().int(),
  }),
  schedule: z.object({
    /** The age by which three planned renewals in four have happened; null without any. */
    usualRenewalAge: z.number().nullable(),
    exposureBeyondUsualAge: z.number(),
    lifeExposure: z.number(),
  }),
});
export type Findings = z.infer<typeof findingsSchema>;
export type HazardBand = z.infer<typeof hazardBand>;
