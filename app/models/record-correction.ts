import { z } from 'zod';
import { effects, outsideCauses } from './failure';

/** The most failures corrected in one go. */
export const mostCorrected = 5000;

/** One thing put right on some failures at once. */
export const correctionSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('void'), reason: z.string().min(1).max(300) }),
  z.object({ kind: z.literal('restore') }),
  z.object({ kind: z.literal('mode'), modeId: z.uuid().nullable() }),
  z.object({ kind: z.literal('outside-cause'), cause: z.enum(outsideCauses).nullable() }),
  z.object({ kind: z.literal('effect'), effect: z.enum(effects) }),
  z.object({ kind: z.literal('date'), failedOn: z.iso.date() }),
  z.object({ kind: z.literal('fitted'), fittedOn: z.iso.date().nullable() }),
  /** All failures of one mode go to another, and nothing more is logged with the first. */
  z.object({ kind: z.literal('merge-mode'), from: z.uuid(), modeId: z.uuid() }),
]);
export type Correction = z.output<typeof correctionSchema>;
export type CorrectionKind = Correction['kind'];

/** The parts of a failure that a correction can change. Days are 'YYYY-MM-DD'. */
export const correctableFieldsSchema = z.object({
  failedOn: z.string(),
  /** ISO instant, or null where only the day is known. */
  failedAt: z.string().nullable(),
  modeId: z.string().nullable(),
  effect: z.enum(effects),
  outsideCause: z.enum(outsideCauses).nullable(),
  itemFittedOn: z.string().nullable(),
  itemAge: z.number().nullable(),
  /** Null where it counts. */
  voidReason: z.string().nullable(),
});
export type CorrectableFields = Readonly<z.output<typeof correctableFieldsSchema>>;

/** A failure with its correction put in; the same object where there is nothing to correct. */
export function corrected(fields: CorrectableFields, correction: Correction): CorrectableFields {
  switch (correction.kind) {
    case 'void':
      return fields.voidReason === null ? { ...fields, voidReason: correction.reason } : fields;
    case 'restore':
      return fields.voidReason === null ? fields : { ...fields, voidReason: null };
    case 'mode':
    case 'merge-mode':
      return fields.modeId === correction.modeId ? fields : { ...fields, modeId: correction.modeId };
    case 'outside-cause':
      return fields.outsideCause === correction.cause
        ? fields
        : { ...fields, outsideCause: correction.cause };
    case 'effect':
      return fields.effect === correction.effect ? fields : { ...fields, effect: correction.effect };
    case 'date':
      // The time of day belonged to the day that was wrong.
      return fields.failedOn === correction.failedOn
        ? fields
        : { ...fields, failedOn: correction.failedOn, failedAt: null };
    case 'fitted':
      return fields.itemFittedOn === correction.fittedOn && fields.itemAge === null
        ? fields
        : { ...fields, itemFittedOn: correction.fittedOn, itemAge: null };
  }
}

/** The parts in which two states of a failure differ. */
export function changedParts(
  before: CorrectableFields,
  after: CorrectableFields,
): (keyof CorrectableFields & string)[] {
  return correctableFieldsSchema.keyof().options.filter((part) => before[part] !== after[part]);
}

/**
 * Whether the days of a failure have to fit its asset anew: where one of them is put right, and where it comes to count
 * again. Records taken in long ago that would be refused today can still be given a mode.
 */
export function asksForDates(before: CorrectableFields, after: CorrectableFields): boolean {
  const parts = changedParts(before, after);
  return (
    parts.some((part) => part === 'failedOn' || part === 'failedAt' || part === 'itemFittedOn') ||
    (before.voidReason !== null && after.voidReason === null)
  );
}
