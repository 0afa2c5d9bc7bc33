import { DateTime } from 'luxon';
import { z } from 'zod';
import { effects, type FailureEntry, outsideCauses } from '~/models/failure';

import { formatCalendarDate } from '~/format/date';

/** The value of the mode field that stands for none of the class's modes. */
export const otherMode = 'other';

const clockTime = /^([01]\d|2[0-3]):[0-5]\d$/;

export const failureFormSchema = z
  .object({
    id: z.uuid('This form has lost its number. Open it again from the asset.'),
    mode: z.union([z.literal(otherMode), z.uuid()], { error: 'Choose what failed, or “Something else”.' }),
    otherText: z.string().trim().max(200, 'Keep this to 200 characters; the note takes more.').optional(),
    effect: z.enum(effects, { error: 'Say what you did.' }),
    when: z.enum(['now', 'earlier'], { error: 'Say when it failed.' }),
    failedOn: z.iso.date('This is not a date: year, month and day are needed.').optional(),
    failedTime: z.string().regex(clockTime, 'This is not a time of day, such as 14:30.').optional(),
    fitted: z.enum(['yes', 'no'], { error: 'Say yes, or “No, or not sure”.' }),
    /** The day the question named: what a yes says yes to. */
    fittedShown: z.iso.date(),
    fittedOn: z.iso.date('This is not a date: year, month and day are needed.').optional(),
    outsideCause: z.enum(outsideCauses).optional(),
    note: z.string().trim().max(3000, 'Keep the note to 3,000 characters.').optional(),
    /** Ids, with commas between, of failures shown as perhaps the same one. */
    seen: z.string().max(4000).optional(),
  })
  .superRefine((form, context) => {
    if (form.when === 'earlier' && form.failedOn === undefined) {
      context.addIssue({ code: 'custom', path: ['failedOn'], message: 'Give the day it failed.' });
    }
  });

export type FailureForm = z.output<typeof failureFormSchema>;

/**
 * The failure a filled-in form tells of.
 *
 * A yes about the fitted-on day stores that day: the person at the machine has confirmed it. A no with a day
 * stores the day given. A no without one stores no day, and the note says that the recorded one is doubted.
 *
 * @param form.failedOn and failedTime are of the time zone; without a time only the day is known.
 */
export function failureOfForm(
  form: FailureForm,
  context: { assetId: string; itemSingular: string; now: Date; today: string; timeZone: string },
): FailureEntry {
  const happenedNow = form.when === 'now';
  const failedOn = happenedNow ? context.today : (form.failedOn ?? context.today);
  const momentStated = form.failedTime
    ? DateTime.fromISO(`${failedOn}T${form.failedTime}`, { zone: context.timeZone }).toJSDate()
    : null;
  return {
    id: form.id.toLowerCase(),
    assetId: context.assetId,
    failedOn,
    failedAt: happenedNow ? context.now : momentStated,
    modeId: form.mode === otherMode ? null : form.mode,
    effect: form.effect,
    outsideCause: form.outsideCause ?? null,
    itemFittedOn: form.fitted === 'yes' ? form.fittedShown : (form.fittedOn ?? null),
    note: noteOf(form, context.itemSingular),
  };
}

function noteOf(form: FailureForm, itemSingular: string): string | null {
  const doubted = form.fitted === 'no' && form.fittedOn === undefined;
  const lines = [
    form.mode === otherMode && form.otherText ? `What failed: ${form.otherText}` : null,
    form.note ?? null,
    doubted
      ? `Not sure that the failed ${itemSingular} had been fitted on ${formatCalendarDate(form.fittedShown)}.`
      : null,
  ].filter((line) => line !== null);
  return lines.length > 0 ? lines.join('\n') : null;
}

/** Ids out of the `seen` field; what is no id is left out. */
export function seenIdsOf(form: FailureForm): string[] {
  return (form.seen ?? '').split(',').filter((id) => z.uuid().safeParse(id).success);
}
