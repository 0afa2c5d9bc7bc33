import { z } from 'zod';
import { effects, outsideCauses } from '~/models/failure';
import { correctionSchema, type Correction } from '~/models/record-correction';

export const correctionChoices = [
  'void',
  'restore',
  'mode',
  'outside-cause',
  'effect',
  'date',
  'fitted',
] as const;

const optionalText = z.string().trim().default('');

/** "id:version", as the table's boxes and the preview's hidden field send it. */
const seenRecord = z
  .string()
  .regex(/^[0-9a-f-]{36}:\d{1,9}$/)
  .transform((text) => {
    const [id = '', version = ''] = text.split(':');
    return { id, version: Number(version) };
  });

const seenList = z
  .string()
  .transform((text) => text.split(',').filter(Boolean))
  .pipe(z.array(seenRecord));

const chosen = {
  record: z.array(seenRecord).default([]),
  /** Everything that matches the filter in the address. */
  all: z.literal('on').optional(),
};

const previewForm = z.object({
  intent: z.literal('preview'),
  ...chosen,
  what: z.enum(correctionChoices, { error: 'Say what to correct.' }),
  reason: optionalText,
  modeId: z.uuid().nullable().default(null),
  cause: z.enum(outsideCauses).nullable().default(null),
  effect: z.enum(effects).optional(),
  failedOn: z.iso.date('Give a day.').optional(),
  fittedOn: z.iso.date('Give a day, or leave it empty.').nullable().default(null),
});

const correctionText = z
  .string()
  .transform((text, check) => {
    try {
      return JSON.parse(text) as unknown;
    } catch {
      check.addIssue('is not JSON');
      return z.NEVER;
    }
  })
  .pipe(correctionSchema);

const planForm = { correctionId: z.uuid(), chosen: seenList, correction: correctionText };

/** The forms of the page where records are put right. */
export const cleanFormSchema = z.discriminatedUnion('intent', [
  previewForm.superRefine((form, check) => {
    const missing = missingField(form);
    if (missing !== null) check.addIssue({ code: 'custom', path: [missing.field], message: missing.message });
  }),
  z.object({
    intent: z.literal('preview-merge'),
    from: z.uuid('Choose the mode that goes.'),
    into: z.uuid('Choose the mode that stays.'),
  }),
  z.object({ intent: z.literal('save'), ...planForm }),
  z.object({ intent: z.literal('preview-again'), ...planForm }),
  z.object({ intent: z.literal('take-back'), correctionId: z.uuid() }),
]);
export type CleanForm = z.output<typeof cleanFormSchema>;
type PreviewForm = z.output<typeof previewForm>;

function missingField(form: PreviewForm): { field: string; message: string } | null {
  if (form.all === undefined && form.record.length === 0) {
    return { field: 'record', message: 'Tick the failures to correct, or all that match.' };
  }
  if (form.what === 'void' && form.reason === '')
    return { field: 'reason', message: 'Say why they should not count.' };
  if (form.what === 'void' && form.reason.length > 300) {
    return { field: 'reason', message: 'Keep the reason to 300 characters.' };
  }
  if (form.what === 'effect' && form.effect === undefined) {
    return { field: 'effect', message: 'Choose what was done.' };
  }
  if (form.what === 'date' && form.failedOn === undefined) {
    return { field: 'failedOn', message: 'Give the day they failed.' };
  }
  return null;
}

/** What the form asks for, as a correction. */
export function correctionOf(form: PreviewForm): Correction {
  switch (form.what) {
    case 'void':
      return { kind: 'void', reason: form.reason };
    case 'restore':
      return { kind: 'restore' };
    case 'mode':
      return { kind: 'mode', modeId: form.modeId };
    case 'outside-cause':
      return { kind: 'outside-cause', cause: form.cause };
    case 'effect':
      return { kind: 'effect', effect: form.effect ?? 'renewed' };
    case 'date':
      return { kind: 'date', failedOn: form.failedOn ?? '' };
    case 'fitted':
      return { kind: 'fitted', fittedOn: form.fittedOn };
  }
}
