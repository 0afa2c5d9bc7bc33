import { z } from 'zod';

/**
 * What schedules would cost: the numbers behind "does a schedule pay?", before any judgement. Intervals and
 * ages are in the class's clock unit; money is integer minor units a year for the whole class.
 */

export const policies = ['age-replacement', 'minimal-repair', 'block-replacement'] as const;
export type Policy = (typeof policies)[number];

/** An estimate with the middle 80 % of the draws. */
const ranged = z.object({ value: z.number().int(), low: z.number().int(), high: z.number().int() });
export type RangedMoney = z.infer<typeof ranged>;

/** Changing from today's interval to another. */
const change = z.object({
  /** Null for no planned renewal at all. */
  interval: z.number().positive().nullable(),
  costPerYear: ranged,
  /** Against today's policy; below 0 where the change costs. */
  savingPerYear: ranged,
  /** Share of the draws in which the change saves money. */
  share: z.number().min(0).max(1),
  /** What one failure would have to cost for the change to make no difference; null where no price above 0 does. */
  breakEvenFailureMinor: z.number().int().positive().nullable(),
});
export type Change = z.infer<typeof change>;

/** The test interval of a hidden function; comes after any statutory one. */
const failureFinding = z.object({
  requiredAvailability: z.number(),
  /** Mean time between failures at a constant rate; null without a failure. */
  meanTime: z.number().nullable(),
  /** Its lower 90 % end. */
  meanTimeLow: z.number(),
  /** Longest interval that gives the availability, at the mean time; null without a failure. */
  interval: z.number().nullable(),
  /** The same at the lower end of the mean time. */
  cautiousInterval: z.number(),
  /** The rule of thumb 2(1 − A)θ. */
  ruleOfThumb: z.number().nullable(),
  /** `interval` (`cautiousInterval` without a failure) as it can be kept, never longer; null where it would be nothing. */
  practicable: z.number().nullable(),
});
export type FailureFinding = z.infer<typeof failureFinding>;

/** What a price rests on besides the costs: enough to price any interval at any costs again, to the digit. */
const basis = z.object({
  policy: z.enum(policies),
  /** Clock units a year and position. */
  unitsAYear: z.number().positive(),
  fit: z.object({
    shape: z.number(),
    scale: z.number(),
    covariance: z.object({ lnShape: z.number(), lnScale: z.number(), cross: z.number() }),
  }),
  exposureByAge: z.array(z.object({ from: z.number(), to: z.number(), exposure: z.number() })),
});
export type PriceBasis = z.infer<typeof basis>;

const always = {
  /** Null without a life shape that can be drawn from. */
  basis: basis.nullable(),
  current: z.object({ interval: z.number().positive().nullable(), task: z.string().nullable() }),
  positions: z.number().int().min(0),
  /** Longest age that at least 5 lives were seen to reach; no interval beyond it is advised for the class. */
  supportedAge: z.number().nullable(),
  failureFinding: failureFinding.nullable(),
};

export const scheduleFindingsSchema = z.discriminatedUnion('kind', [
  /** No life shape, or one so uncertain or extreme that no price comes out. */
  z.object({ kind: z.literal('no-fit'), reason: z.enum(['no-shape', 'out-of-range']), ...always }),
  z.object({
    kind: z.literal('costs-missing'),
    /** Not given, or not above 0. */
    missing: z.array(z.enum(['planned', 'failure'])).min(1),
    ...always,
  }),
  z.object({
    kind: z.literal('priced'),
    policy: z.enum(policies),
    /** Of one renewal in this policy and of one failure. */
    costs: z.object({ plannedMinor: z.number().int(), failureMinor: z.number().int() }),
    best: z.object({
      /** Of the fit, to the digit; null where no planned renewal is cheapest. */
      exact: z.number().positive().nullable(),
      /** As it can be kept and within the supported age; null where there is none. */
      interval: z.number().positive().nullable(),
      /** Whether `exact` lies beyond the supported age. */
      beyondData: z.boolean(),
      /** Middle 80 % of the draws; an end is null where no planned renewal is cheapest. */
      range: z.object({ low: z.number().nullable(), high: z.number().nullable() }),
    }),
    today: ranged,
    changes: z.object({
      /** To `best.interval`; null where there is none. */
      best: change.nullable(),
      /** To no planned renewal. */
      stop: change,
      /** To one and a half times the age beyond which the schedule hides everything; null where nothing is hidden or that is no longer than today. */
      trial: change.nullable(),
      /** To `best.exact` as it can be kept, beyond the supported age; only where it lies there and the schedule hides. */
      bestBeyondData: change.nullable(),
    }),
    curve: z.array(
      z.object({
        interval: z.number(),
        cost: z.number().int(),
        low: z.number().int(),
        high: z.number().int(),
      }),
    ),
    ...always,
  }),
]);
export type ScheduleFindings = z.infer<typeof scheduleFindingsSchema>;
export type PricedSchedule = Extract<ScheduleFindings, { kind: 'priced' }>;
