import { z } from 'zod';
import { daysAMonth } from '~/advice/practicable-interval';

/** Units an interval can be given in; hours belong to the clock of operating hours alone. */
export const intervalUnits = ['days', 'weeks', 'months', 'years', 'hours'] as const;
export type IntervalUnit = (typeof intervalUnits)[number];

const clockUnits: Record<IntervalUnit, number> = {
  days: 1,
  weeks: 7,
  months: daysAMonth,
  years: 12 * daysAMonth,
  hours: 1,
};

const howMuch = 'Give a number above 0, such as 5 or 2.5.';

/** The form that puts a change forward. An interval comes out in clock units. */
export const putForwardSchema = z
  .object({
    id: z.uuid(),
    /** Of a change that is put forward already and is to say something else: the version the person saw. */
    version: z.number().int().optional(),
    taskId: z.uuid().nullable().default(null),
    policy: z.enum(['interval', 'run-to-failure'], { error: 'Say what is to be done.' }),
    interval: z
      .string()
      .trim()
      .transform((text) => Number(text.replace(',', '.')))
      .pipe(z.number({ error: howMuch }).positive(howMuch).max(1_000_000, 'That is too long to be meant.'))
      .optional(),
    unit: z.enum(intervalUnits).default('days'),
    scope: z.enum(['class', 'part']).default('class'),
    sites: z.array(z.uuid()).max(500).default([]),
    tags: z.string().trim().max(20_000, 'Too many tags; choose a site instead.').default(''),
    reason: z
      .string({ error: 'Say why.' })
      .trim()
      .min(1, 'Say why.')
      .max(2000, 'Keep the reason to 2,000 characters.'),
  })
  .refine(({ policy, interval }) => policy !== 'interval' || interval !== undefined, {
    path: ['interval'],
    message: howMuch,
  })
  .refine(({ policy, scope }) => policy === 'interval' || scope === 'class', {
    path: ['scope'],
    message: 'A trial needs an interval: try a longer one on a part.',
  })
  .transform(({ policy, interval, unit, tags, ...form }) => ({
    ...form,
    to: policy === 'run-to-failure' ? null : (interval ?? 0) * clockUnits[unit],
    tags: tags === '' ? [] : tags.split(/[\s,;]+/).filter(Boolean),
  }));
export type PutForwardForm = z.output<typeof putForwardSchema>;

/** An interval in the unit in which it comes out whole, for the form's fields. */
export function intervalFields(interval: number, clock: 'calendar-days' | 'operating-hours') {
  if (clock === 'operating-hours')
    return { interval: String(Number(interval.toPrecision(6))), unit: 'hours' };
  const months = interval / daysAMonth;
  if (Math.abs(months - Math.round(months)) < 0.02 && months > 0.9) {
    return { interval: String(Math.round(months)), unit: 'months' };
  }
  return interval % 7 === 0
    ? { interval: String(interval / 7), unit: 'weeks' }
    : { interval: String(Math.round(interval)), unit: 'days' };
}
