import { describe, expect, it } from 'vitest';
import { intervalFields, putForwardSchema } from '~/components/changes/put-forward-schema';
import { proposedStart, startAt } from '~/components/changes/put-forward-fields';
import { changesFilter, changesQuery, changesSearch } from '~/components/changes/search';

const daysAMonth = 365.25 / 12;
const form = (differences: Record<string, unknown> = {}) => ({
  id: '3f8a1d1e-2f64-4c8e-9d0a-0c7f5a1b2c3d',
  policy: 'interval',
  interval: '5',
  unit: 'months',
  reason: 'They wear.',
  ...differences,
});

describe('the form that puts a change forward', () => {
  it.each([
    ['5', 'months', 5 * daysAMonth],
    ['2,5', 'years', 30 * daysAMonth],
    ['6', 'weeks', 42],
    ['45', 'days', 45],
    ['2100', 'hours', 2100],
  ])('reads every %s %s', (interval, unit, to) => {
    expect(putForwardSchema.parse(form({ interval, unit })).to).toBeCloseTo(to, 9);
  });

  it('takes no interval for run to failure, whatever stands in the field', () => {
    expect(putForwardSchema.parse(form({ policy: 'run-to-failure' })).to).toBeNull();
  });

  it('splits tags by spaces, commas and lines', () => {
    expect(putForwardSchema.parse(form({ tags: ' A-1, A-2;\nA-3 ' })).tags).toEqual(['A-1', 'A-2', 'A-3']);
  });

  it.each([
    { interval: '0' },
    { interval: 'often' },
    { interval: undefined },
    { reason: ' ' },
    { policy: 'else' },
  ])('refuses %j', (differences) => {
    expect(putForwardSchema.safeParse(form(differences)).success).toBe(false);
  });
});

describe('an interval in the form’s fields', () => {
  it.each([
    [5 * daysAMonth, 'calendar-days', { interval: '5', unit: 'months' }],
    [42, 'calendar-days', { interval: '6', unit: 'weeks' }],
    [1000, 'calendar-days', { interval: '1000', unit: 'days' }],
    [2100, 'operating-hours', { interval: '2100', unit: 'hours' }],
  ] as const)('writes %s of %s', (interval, clock, fields) => {
    expect(intervalFields(interval, clock)).toEqual(fields);
    const { to } = putForwardSchema.parse(form(fields));
    expect(to).toBeCloseTo(interval, 6);
  });

  it('starts at run to failure, at a trial, or with nothing', () => {
    expect(startAt({ to: null, onPart: false }, 'calendar-days')).toEqual({
      policy: 'run-to-failure',
      scope: 'class',
    });
    expect(startAt({ to: 42, onPart: true }, 'calendar-days')).toMatchObject({
      interval: '6',
      scope: 'part',
    });
    const standing = { clock: 'calendar-days', today: null, cautions: [] } as const;
    const proposal = { action: 'gather', to: { interval: 42 } } as Parameters<
      typeof proposedStart
    >[0]['proposal'];
    expect(proposedStart({ ...standing, proposal })).toEqual({ policy: 'interval', scope: 'class' });
    expect(proposedStart({ ...standing, proposal: { ...proposal, action: 'trial' } })).toMatchObject({
      interval: '6',
      scope: 'part',
    });
  });
});

describe('the list’s address', () => {
  it('says only what is not as usual, and reads back the same', () => {
    expect(changesQuery(changesSearch.parse({}))).toBe('');
    const state = changesSearch.parse({ group: 'past', sort: 'saving', direction: 'desc', page: '3' });
    const query = changesQuery(state);
    expect(query).toBe('?group=past&sort=saving&direction=desc&page=3');
    expect(changesSearch.parse(Object.fromEntries(new URLSearchParams(query)))).toEqual(state);
    expect(changesFilter(state)).toEqual({
      group: 'past',
      classId: undefined,
      siteId: undefined,
      sort: 'saving',
      direction: 'desc',
    });
  });

  it('is as if it said nothing where it says nonsense', () => {
    expect(
      changesSearch.parse({ group: 'x', site: 'x', class: 'x', sort: 'x', direction: 'x', page: 'x' }),
    ).toEqual(changesSearch.parse({}));
  });
});
