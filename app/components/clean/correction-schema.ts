import { z } from 'zod';
import { effects, outsideCauses } from '~/models/failure';
import { correctionSchema, mostCorrected, type Correction } from '~/models/record-correction';

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
  .pipe(z.array(seenRecord).max(mostCorrected));

const chosen = {
  record: z.array(seenRecord).default([]),
  /** What was chosen before and is not on the page of the list that is shown. */
  also: seenList.default([]),
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

const planForm = {
  correctionId: z.uuid(),
  // Empty where two modes without failures are merged.
  chosen: seenList.default([]),
  /** Whether all that match the filter were chosen, so that going back leads to the same choice. */
  all: z.literal('on').optional(),
  correction: correctionText,
};

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
  z.object({ intent: z.literal('leave-out'), ...planForm }),
  z.object({ intent: z.literal('choose-again'), ...planForm }),
  z.object({ intent: z.literal('take-back'), correctionId: z.uuid() }),
]);
export type CleanForm = z.output<typeof cleanFormSchema>;
type PreviewForm = z.output<typeof previewForm>;

function missingField(form: PreviewForm): { field: string; message: string } | null {
  if (form.all === undefined && form.record.length === 0 && form.also.length === 0) {
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

/** What the form would hold for a correction: what was typed and ticked, to go back to. */
export function formOf({
  chosen,
  all,
  correction,
}: Pick<Extract<CleanForm, { intent: 'save' }>, 'chosen' | 'all' | 'correction'>): Record<
  string,
  string | string[]
> {
  if (correction.kind === 'merge-mode') {
    return { intent: 'preview-merge', from: correction.from, into: correction.modeId };
  }
  const record = chosen.map(({ id, version }) => `${id}:${version}`);
  return {
    intent: 'preview',
    what: correction.kind,
    ...(all === undefined ? { record } : { all }),
    ...typedOf(correction),
  };
}

function typedOf(correction: Exclude<Correction, { kind: 'merge-mode' }>): Record<string, string> {
  switch (correction.kind) {
    case 'void':
      return { reason: correction.reason };
    case 'restore':
      return {};
    case 'mode':
      return { modeId: correction.modeId ?? '' };
    case 'outside-cause':
      return { cause: correction.cause ?? '' };
    case 'effect':
      return { effect: correction.effect };
    case 'date':
      return { failedOn: correction.failedOn };
    case 'fitted':
      return { fittedOn: correction.fittedOn ?? '' };
  }
}
