import { z } from 'zod';

/** Failures seen in an exposure. */
const countInExposure = z.object({ failures: z.number().int(), exposure: z.number() });

/** How a class's failures lie about: over positions, days, visits, dates, and about the fitted curves. */
export const scatterFindingsSchema = z.object({
  /** Whether counts per position are more uneven than one rate allows; null with no failure or one position. */
  perPosition: z
    .object({
      positions: z.number().int(),
      failures: z.number().int(),
      statistic: z.number(),
      degreesOfFreedom: z.number().int(),
      p: z.number(),
      /** How many positions have more failures than chance explains, and the worst of them by tag. */
      standingOut: z.number().int(),
      worst: z.array(
        z.object({
          positionId: z.string(),
          tag: z.string(),
          failures: z.number().int(),
          expected: z.number(),
        }),
      ),
    })
    .nullable(),
  /** Days on which more failures came together than chance explains, over the class or at one site; the least likely first. */
  sameCause: z.object({
    found: z.number().int(),
    clusters: z.array(
      z.object({
        /** Day number. */
        day: z.number(),
        /** Null where all sites of the class are taken together. */
        siteName: z.string().nullable(),
        failures: z.number().int(),
        expected: z.number(),
        p: z.number(),
      }),
    ),
  }),
  /** Failures in the 30 days after planned visits beside the rest, in item-days; null without a visit. */
  afterVisit: z
    .object({
      visits: z.number().int(),
      after: countInExposure,
      otherwise: countInExposure,
      /** Rate after visits over the rest, with the exact 90 % interval; null where one side has nothing to compare. */
      ratio: z.number().nullable(),
      low: z.number(),
      high: z.number().nullable(),
    })
    .nullable(),
  /** How precise the dates of failures look. */
  dates: z.object({
    failures: z.number().int(),
    onFirstOfMonth: z.number().int(),
    /** Failures that share their moment of record with another, and how many would by chance. */
    tied: z.number().int(),
    tiedByChance: z.number(),
    withoutTime: z.number().int(),
  }),
  /** Checks of the fitted curves; null where there are too few failures for the check. */
  fit: z.object({
    trend: z
      .object({
        failures: z.number().int(),
        statistic: z.number(),
        criticalAtFivePercent: z.number(),
        rejected: z.boolean(),
      })
      .nullable(),
    life: z
      .object({
        failures: z.number().int(),
        bands: z.number().int(),
        statistic: z.number(),
        degreesOfFreedom: z.number().int(),
        p: z.number(),
      })
      .nullable(),
  }),
  /** Assets that stand for several items, their items, and how many of those are of unknown age. */
  groups: z.object({
    assets: z.number().int(),
    items: z.number().int(),
    itemsOfUnknownAge: z.number().int(),
  }),
});
export type ScatterFindings = z.infer<typeof scatterFindingsSchema>;
