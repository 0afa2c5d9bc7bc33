import { z } from 'zod';
import { intervalUnits } from '~/components/changes/put-forward-schema';
import { parseMoney } from '~/models/money';
import { taskKinds } from '~/models/task-kinds';

const days = { days: 1, weeks: 7, months: 365.25 / 12, years: 365.25, hours: 1 } as const;
const howOften = 'Give a number above 0, such as 6.';

/** The forms of the page of planned maintenance; amounts are read in the organisation's currency. */
export function taskFormSchema(currency: string) {
  const cost = z
    .string()
    .trim()
    .default('')
    .transform((text, check) => {
      if (text === '') return null;
      const amount = parseMoney(text, currency);
      if (amount === undefined) check.addIssue('Give an amount such as 180 or 180.50, or leave it empty.');
      return amount ?? null;
    });
  const described = {
    name: z
      .string({ error: 'Give it a name.' })
      .trim()
      .min(1, 'Give it a name.')
      .max(120, 'Keep the name to 120 characters.'),
    statutoryReference: z
      .string()
      .trim()
      .max(300, 'Keep it to 300 characters.')
      .default('')
      .transform((text) => text || null),
    cost,
  };
  const seen = { taskId: z.uuid(), version: z.number().int() };
  return z.discriminatedUnion('intent', [
    z
      .object({
        intent: z.literal('add'),
        ...described,
        kind: z.enum(taskKinds, { error: 'Say what is done.' }),
        interval: z
          .string({ error: howOften })
          .trim()
          .transform((text) => Number(text.replace(',', '.')))
          .pipe(
            z.number({ error: howOften }).positive(howOften).max(1_000_000, 'That is too long to be meant.'),
          ),
        unit: z.enum(intervalUnits),
        startsOn: z.iso.date({ error: 'Give the day from which it holds.' }),
      })
      .transform(({ interval, unit, ...form }) => ({
        ...form,
        intervalDays: unit === 'hours' ? null : Math.max(1, Math.round(interval * days[unit])),
        intervalHours: unit === 'hours' ? interval : null,
      })),
    z.object({ intent: z.literal('describe'), ...seen, ...described }),
    z.object({
      intent: z.literal('end'),
      ...seen,
      endsOn: z.iso.date({ error: 'Give the day it ends.' }),
      /** That a law or code asks for it, and that whoever answers for it has agreed. */
      confirmed: z.literal('on').optional(),
    }),
  ]);
}
