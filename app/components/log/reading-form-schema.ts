import { z } from 'zod';

const hoursSentence = 'Write the hours the meter shows, such as 10452 or 10452.5.';

/** A figure off the meter, decimals after a point or a comma, spaces between thousands as it may show them. */
const hours = z.string({ error: hoursSentence }).transform((text, context) => {
  const plain = text.replace(/\s/g, '').replace(',', '.');
  if (/^\d{1,9}(\.\d{1,2})?$/.test(plain)) return Number(plain);
  context.addIssue({ code: 'custom', message: hoursSentence });
  return z.NEVER;
});

const change = { readingId: z.uuid(), version: z.number().int() };

/** Everything the page of meter readings can send. */
export const readingFormSchema = z.discriminatedUnion('intent', [
  z.object({
    intent: z.literal('add'),
    id: z.uuid('This form has lost its number. Open it again from the asset.'),
    readOn: z.iso.date('Give the day it was read: year, month and day.'),
    hours,
    meterChanged: z.boolean().default(false),
  }),
  z.object({ intent: z.literal('void'), ...change }),
  z.object({ intent: z.literal('restore'), ...change }),
]);
