import { z } from 'zod';

/** Failures to come of the whole class, before any judgement. */

/**
 * What a forecast goes by: the rate over all records; the last year's rate, where it differs from the rate
 * before; or the ages in place, where the life clock shows wear-out.
 */
export const forecastBases = ['rate', 'last-year-rate', 'ages'] as const;

/** Two-sided chance that a period's count falls within its range, and that the mean time lies in its interval. */
export const forecastConfidence = 0.9;

/** Months ahead. */
export const forecastMonths = [1, 3, 12] as const;

const period = z.object({
  months: z.union([z.literal(1), z.literal(3), z.literal(12)]),
  mean: z.number().min(0),
  /** Whole failures; at least so many and at most so many, with the confidence above. */
  low: z.number().int(),
  high: z.number().int(),
});

export const forecastFindingsSchema = z.discriminatedUnion('kind', [
  /** Nothing in service, or never watched. */
  z.object({ kind: z.literal('nothing-to-go-by') }),
  z.object({
    kind: z.literal('forecast'),
    basis: z.enum(forecastBases),
    confidence: z.literal(forecastConfidence),
    /** Positions in service now, and of these the ones whose item's age nobody knows. */
    positions: z.number().int(),
    agesUnknown: z.number().int(),
    periods: z.array(period),
    /** Site by site, in order of name. Means add up to the class's; ranges do not. */
    sites: z.array(
      z.object({
        siteId: z.string(),
        siteName: z.string(),
        positions: z.number().int(),
        periods: z.array(period),
        /** To last a lead time with the chance of the service level; null where no lead time is set. */
        spares: z.number().int().nullable(),
      }),
    ),
    /** Between failures of one position over the records the forecast goes by, clock units; ends left open are null. */
    meanTime: z.object({
      value: z.number().nullable(),
      low: z.number().nullable(),
      high: z.number().nullable(),
      failures: z.number().int(),
      exposure: z.number(),
    }),
    /** Spares to hold so that they last a lead time with the chance of the service level; null where no lead time is set. */
    spares: z
      .object({
        leadTimeDays: z.number(),
        serviceLevel: z.number(),
        meanDemand: z.number(),
        /** Failures alone; planned renewals bring their parts with them. */
        spares: z.number().int(),
      })
      .nullable(),
  }),
]);
export type ForecastFindings = z.infer<typeof forecastFindingsSchema>;
