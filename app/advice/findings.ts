import { z } from 'zod';
import { ageRankFindingsSchema } from './age-rank-findings';
import { alarmFindingsSchema } from './alarm-findings';
import { leftOutReasons } from './class-evidence';
import { forecastFindingsSchema } from './forecast-findings';
import { lifeEstimatesSchema } from './life-estimates';
import { modesFindingsSchema } from './mode-findings';
import { scatterFindingsSchema } from './scatter-findings';
import { scheduleFindingsSchema } from './schedule-findings';
import { openIntervalSchema, shapeFitSchema } from './shape-fit';

/**
 * The estimates of one class on one night, before any judgement: numbers only, as they are stored.
 *
 * Ages and exposures are in the class's clock unit, moments are day numbers. Where a number cannot be
 * had, the field says why instead of holding a stand-in.
 */

/** Failures in an exposure, and the mean time between them with its 90 % interval. */
const failureRate = z.object({
  failures: z.number().int(),
  exposure: z.number(),
  /** Null without a failure: then only the lower end is known. */
  meanTime: z.number().nullable(),
  meanTimeInterval: openIntervalSchema,
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

/** A curve that adds up, at the last point it reaches, with its 90 % band. */
const lastPoint = z.object({ age: z.number(), value: z.number(), low: z.number(), high: z.number() });

export const findingsSchema = z.object({
  clock: z.enum(['calendar-days', 'operating-hours']),
  extent: z.object({
    positions: z.number().int(),
    /** Of these, items of quantity assets whose ages cannot be told apart. */
    rateOnlyPositions: z.number().int(),
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
  rate: z.object({
    overall: failureRate,
    lastYear: failureRate,
    /** The last year's rate over the rate before, with the exact 90 % interval; null where one has no running time. */
    lastYearAgainstBefore: z
      .object({ ratio: z.number().nullable(), low: z.number(), high: z.number().nullable(), p: z.number() })
      .nullable(),
  }),
  trend: z.object({
    laplace: z.object({ u: z.number(), p: z.number(), failures: z.number().int() }).nullable(),
    militaryHandbook: z
      .object({ statistic: z.number(), degreesOfFreedom: z.number().int(), p: z.number() })
      .nullable(),
    slope: shapeFitSchema,
    /** Exact interval of the slope, where all positions are watched from age 0 to one and the same age. */
    exactSlopeInterval: z.object({ low: z.number(), high: z.number() }).nullable(),
    /** Mean number of failures a position has had by an age: the mean cumulative function. */
    failuresPerPosition: lastPoint.nullable(),
    /** Where on the pooled exposure clock each failure stands, ascending. */
    failureExposures: z.array(z.number()),
    totalExposure: z.number(),
    /** Exposure since the last failure, and the chance of such a silence at the rate before; null without a failure. */
    silence: z.object({ exposure: z.number(), chance: z.number() }).nullable(),
  }),
  life: z.object({
    ...lifeEstimatesSchema.shape,
    /** Nelson–Aalen. */
    cumulativeHazard: lastPoint.nullable(),
    hazardBands: z.array(hazardBand),
    longestAge: z.number(),
    failuresToSettle: z.object({ total: z.number().int(), more: z.number().int() }).nullable(),
  }),
  ageRank: ageRankFindingsSchema.extend({
    /** One mark a failure, in order of time: rank share, peers under watch, moment. */
    marks: z.array(z.object({ share: z.number(), peers: z.number().int(), at: z.number() })),
  }),
  renewals: z.object({
    /** The age by which three planned renewals in four have happened; null without any. */
    usualAge: z.number().nullable(),
    exposureBeyondUsualAge: z.number(),
    lifeExposure: z.number(),
  }),
  modes: modesFindingsSchema,
  scatter: scatterFindingsSchema,
  schedule: scheduleFindingsSchema,
  forecast: forecastFindingsSchema,
  alarms: alarmFindingsSchema,
});
export type Findings = z.infer<typeof findingsSchema>;
