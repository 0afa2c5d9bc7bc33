import { z } from 'zod';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import { actions } from '~/advice/proposal';

const openInterval = z.object({ low: z.number().nullable(), high: z.number().nullable() });

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
});
export type AssessmentSummary = z.infer<typeof assessmentSummarySchema>;

export function summarise(
  { clock, extent, rate, trend }: Findings,
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
  };
}
