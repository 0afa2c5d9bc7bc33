import { z } from 'zod';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import type { ForecastFindings } from '~/advice/forecast-findings';
import { actions } from '~/advice/proposal';

const openInterval = z.object({ low: z.number().nullable(), high: z.number().nullable() });

const expected = z.object({ mean: z.number(), low: z.number().int(), high: z.number().int() });

/** Failures to come and spares to hold, of the whole class (no site) or of one site. */
const toCome = z.object({
  siteId: z.string().nullable(),
  positions: z.number().int(),
  /** In the next 1, 3 and 12 months. */
  m1: expected,
  m3: expected,
  m12: expected,
  spares: z.number().int().nullable(),
});

/** The few numbers of an assessment that lists show and sort by. Units: the class's clock. */
export const assessmentSummarySchema = z.object({
  clock: z.enum(['calendar-days', 'operating-hours']),
  positions: z.number().int(),
  exposure: z.number(),
  failuresLastYear: z.number().int(),
  exposureLastYear: z.number(),
  meanTime: z.number().nullable(),
  meanTimeInterval: openInterval,
  slope: z.number().nullable(),
  slopeInterval: openInterval,
  action: z.enum(actions),
  /** Integer minor units; null where nothing is to be saved, or nobody can say. */
  savingPerYearMinor: z.number().int().nullable(),
  toCome: z.array(toCome),
});
export type AssessmentSummary = z.infer<typeof assessmentSummarySchema>;

/** What the list of classes shows of it. */
export const listedSummarySchema = assessmentSummarySchema.omit({ toCome: true });
export type ListedSummary = z.infer<typeof listedSummarySchema>;

export function summarise(
  { clock, extent, rate, trend, forecast }: Findings,
  { proposal }: Conclusion,
): AssessmentSummary {
  const { slope } = trend;
  return {
    clock,
    positions: extent.positions,
    exposure: rate.overall.exposure,
    failuresLastYear: rate.lastYear.failures,
    exposureLastYear: rate.lastYear.exposure,
    meanTime: rate.overall.meanTime,
    meanTimeInterval: rate.overall.meanTimeInterval,
    slope: slope.kind === 'fit' ? slope.shape : null,
    slopeInterval: slope.kind === 'fit' ? slope.shapeInterval : { low: null, high: null },
    action: proposal.action,
    savingPerYearMinor: proposal.savingPerYearMinor?.value ?? null,
    toCome: toComeOf(forecast),
  };
}

function toComeOf(forecast: ForecastFindings): AssessmentSummary['toCome'] {
  if (forecast.kind !== 'forecast') return [];
  const { positions, periods, spares, sites } = forecast;
  const whole = { siteId: null, positions, periods, spares: spares?.spares ?? null };
  return [whole, ...sites].map((part) => {
    const within = (months: number) => {
      const { mean, low, high } = part.periods.find((period) => period.months === months)!;
      return { mean: Number(mean.toPrecision(6)), low, high };
    };
    return {
      siteId: part.siteId,
      positions: part.positions,
      m1: within(1),
      m3: within(3),
      m12: within(12),
      spares: part.spares,
    };
  });
}
