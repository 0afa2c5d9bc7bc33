import { describe, expect, it } from 'vitest';
import { failureFormSchema, failureOfForm, seenIdsOf } from '~/components/log/failure-form-schema';
import { fittedQuestion } from '~/components/log/fitted-question';

const id = '3f0c1a52-9a53-4c0e-8b1e-0c5a3c1f9d10';
const modeId = '5b1f0a52-9a53-4c0e-8b1e-0c5a3c1f9d11';
const plain = { id, mode: modeId, effect: 'renewed', when: 'now', fitted: 'yes', fittedShown: '2025-03-14' };
const context = {
  assetId: 'asset',
  itemSingular: 'seal',
  now: new Date('2026-07-01T23:30:00Z'),
  today: '2026-07-02',
  timeZone: 'Europe/London',
};
const failureOf = (fields: object) =>
  failureOfForm(failureFormSchema.parse({ ...plain, ...fields }), context);

describe('the failure a form tells of', () => {
  it('is of this moment and of the day it is at home, unless said otherwise', () => {
    expect(failureOf({})).toEqual({
      id,
      assetId: 'asset',
      failedOn: '2026-07-02',
      failedAt: context.now,
      modeId,
      effect: 'renewed',
      outsideCause: null,
      itemFittedOn: '2025-03-14',
      note: null,
    });
  });

  it('takes a time of day as one at home, and no time as not known', () => {
    const earlier = { when: 'earlier', failedOn: '2026-06-30' };
    expect(failureOf({ ...earlier, failedTime: '14:05' })).toMatchObject({
      failedOn: '2026-06-30',
      failedAt: new Date('2026-06-30T13:05:00Z'),
    });
    expect(failureOf(earlier)).toMatchObject({ failedOn: '2026-06-30', failedAt: null });
  });

  it('leaves the fields of "earlier" out when it was just now', () => {
    expect(failureOf({ failedOn: '2020-01-01', failedTime: '10:00' })).toMatchObject({
      failedOn: '2026-07-02',
      failedAt: context.now,
    });
  });

  it('keeps the words for something else in the note, with no mode', () => {
    const failure = failureOf({ mode: 'other', otherText: 'cracked collar', note: 'Spare on order.' });
    expect(failure.modeId).toBeNull();
    expect(failure.note).toBe('What failed: cracked collar\nSpare on order.');
    expect(failureOf({ otherText: 'left over from a changed mind' }).note).toBeNull();
  });

  it('stores the day given with a no, and a doubt in the note when none is given', () => {
    expect(failureOf({ fitted: 'no', fittedOn: '2025-11-01' })).toMatchObject({
      itemFittedOn: '2025-11-01',
      note: null,
    });
    expect(failureOf({ fitted: 'no' })).toMatchObject({
      itemFittedOn: null,
      note: 'Not sure that the failed seal had been fitted on 14 March 2025.',
    });
  });
});

describe('what the form asks for', () => {
  const problems = (fields: object) =>
    Object.fromEntries(
      failureFormSchema
        .safeParse({ ...plain, ...fields })
        .error!.issues.map(({ path, message }) => [path.join('.'), message]),
    );

  it('is said in sentences beside each field', () => {
    const nothing = { mode: undefined, effect: undefined, when: undefined, fitted: undefined };
    expect(problems(nothing)).toEqual({
      mode: 'Choose what failed, or “Something else”.',
      effect: 'Say what you did.',
      when: 'Say when it failed.',
      fitted: 'Say yes, or “No, or not sure”.',
    });
  });

  it('is a day for "earlier", and real days and times', () => {
    expect(problems({ when: 'earlier' })).toEqual({ failedOn: 'Give the day it failed.' });
    expect(
      Object.keys(problems({ failedOn: '2026-02-30', failedTime: '24:00', fittedOn: 'May' })).sort(),
    ).toEqual(['failedOn', 'failedTime', 'fittedOn']);
  });

  it('takes only ids for failures that were shown', () => {
    expect(seenIdsOf(failureFormSchema.parse({ ...plain, seen: `${id},x,` }))).toEqual([id]);
    expect(seenIdsOf(failureFormSchema.parse(plain))).toEqual([]);
  });
});

describe('the question about the fitted-on day', () => {
  const asset = { tag: 'FB-1', quantity: 1, itemSingular: 'lamp', itemPlural: 'lamps' };

  it('presumes yes only for one item with a recorded day', () => {
    const recorded = { on: '2025-03-14', standing: 'recorded' } as const;
    expect(fittedQuestion(asset, recorded)).toMatchObject({
      presumed: true,
      label: 'Was the old one fitted on 14 March 2025?',
    });
    expect(fittedQuestion(asset, { ...recorded, standing: 'assumed' }).presumed).toBe(false);
    expect(fittedQuestion({ ...asset, quantity: 96 }, recorded).presumed).toBe(false);
  });
});
