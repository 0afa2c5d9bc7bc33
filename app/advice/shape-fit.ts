import { z } from 'zod';
import type { NoPowerLawFit, PowerLawFit } from '~/reliability/power-law';
import { noFitSentence } from './no-fit-sentence';

/** An end that the data leave open is null. */
export const openIntervalSchema = z.object({ low: z.number().nullable(), high: z.number().nullable() });

/** A power-law fit as it is stored, or why there is none. */
export const shapeFitSchema = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('fit'),
    shape: z.number(),
    scale: z.number(),
    shapeInterval: openIntervalSchema,
    /** Standard error of ln shape. */
    lnShapeStandardError: z.number(),
    logLikelihood: z.number(),
    failures: z.number().int(),
  }),
  z.object({ kind: z.literal('cannot-be-estimated'), reason: z.string(), failures: z.number().int() }),
]);
export type ShapeFit = z.infer<typeof shapeFitSchema>;

/** @param which what kind of failures were counted, for the reason: "of known age", "on record". */
export function toShapeFit(fit: PowerLawFit | NoPowerLawFit, which: string): ShapeFit {
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
