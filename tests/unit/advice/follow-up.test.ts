import { describe, expect, it } from 'vitest';
import { aimOf, followUp, followUpPeriod, followUpSchema, type FollowUpInput } from '~/advice/follow-up';
import { anEvent, aPosition } from '../../support/position';

const days = 365.25;

/** Forty positions, three years before and so long after, with what differs. */
function input(differences: Partial<FollowUpInput> & { years?: number } = {}): FollowUpInput {
  const { years = 0.5, ...given } = differences;
  return {
    aim: 'prevent',
    isOver: false,
    against: 'before',
    base: { from: 0, to: 3 * days, failures: 60, plannedRenewals: 40, exposure: 40 * 3 * days },
    after: {
      from: 3 * days,
      to: (3 + years) * days,
      failures: 10,
      plannedRenewals: 20,
      exposure: 40 * years * days,
    },
    costs: { plannedMinor: null, failureMinor: null },
    unitsAYear: days,
    ...given,
  };
}
const after = (failures: number, plannedRenewals = 20, years = 0.5) => ({
  ...input({ years }).after,
  failures,
  plannedRenewals,
});
const base = (failures: number, plannedRenewals = 40) => ({ ...input().base, failures, plannedRenewals });
const wordOf = (differences: Partial<FollowUpInput>) => followUp(input(differences))?.word;

describe('a change that is to prevent failures', () => {
  it('helped when there are clearly fewer', () => {
    const result = followUp(input({ after: after(1) }))!;
    // R: poisson.test(c(1, 60), c(20, 120), conf.level = 0.9)
    expect(result.ratio).toBeCloseTo(0.1, 12);
    expect(result.p).toBeCloseTo(0.001_528_28, 8);
    expect(result.low).toBeCloseTo(0.005_047_364, 8);
    expect(result.high).toBeCloseTo(0.489_447_3, 6);
    expect(result.word).toBe('helped');
    expect(result.sentence).toMatch(/^It helped: fewer fail\. 1 failure in 20 item-years since, 60 failures/);
    expect(followUpSchema.parse(JSON.parse(JSON.stringify(result)))).toEqual(result);
  });

  it('made no difference when the rates are the same within a half', () => {
    expect(wordOf({ base: base(300), after: after(50) })).toBe('no-difference');
  });

  it('made it worse when there are clearly more', () => {
    expect(wordOf({ after: after(25) })).toBe('worse');
  });

  it('made it worse when fewer fail but all together it costs more', () => {
    const costs = { plannedMinor: 90_000, failureMinor: 10_000 };
    expect(wordOf({ after: after(1, 200), costs })).toBe('worse');
    expect(wordOf({ after: after(1, 6), costs })).toBe('helped');
  });

  it('cannot be told early on, and says when no difference would show', () => {
    const result = followUp(input({ base: base(300), after: after(4, 2, 0.04) }))!;
    expect(result.word).toBe('too-early');
    expect(result.sentence).toMatch(/^Too early to say\./);
    // 1 / ((ln 1.5 / 1.645)² − 1/300) = 17.4 failures, at 100 a year: 0.174 years less the 0.04 gone by.
    expect(result.sentence).toContain('in about 2 months');
  });

  it('says that few failures before can never show that nothing changed', () => {
    const result = followUp(input({ base: base(6), after: after(1) }))!;
    expect(result.word).toBe('too-early');
    expect(result.sentence).toContain('only a large one can show');
    const none = followUp(input({ base: base(0), after: after(1) }))!;
    expect(none).toMatchObject({ word: 'too-early', ratio: null, high: null });
    expect(none.sentence).toContain('only a large one can show');
  });

  it('says it differently once a later change took over: it waits for nothing', () => {
    const result = followUp(input({ base: base(300), after: after(4, 2, 0.04), isOver: true }))!;
    expect(result.word).toBe('too-early');
    expect(result.sentence).toMatch(/^It was not in force for long enough to say\./);
    expect(result.sentence).not.toContain('in about');
  });
});

describe('a change that is to spare planned work', () => {
  const costs = { plannedMinor: 30_000, failureMinor: 40_000 };

  it('helped when all together it clearly costs less', () => {
    const result = followUp(input({ aim: 'spare', base: base(300, 600), after: after(52, 0), costs }))!;
    expect(result.word).toBe('helped');
    expect(result.cost?.base).toBeCloseTo((300 * 40_000 + 600 * 30_000) / 120, 6);
    expect(result.cost?.after).toBeCloseTo((52 * 40_000) / 20, 6);
    expect(result.sentence).toMatch(/^It helped: all together less is spent\./);
  });

  it('made it worse when the failures cost more than the work that is spared', () => {
    expect(wordOf({ aim: 'spare', base: base(300, 100), after: after(90, 10), costs })).toBe('worse');
  });

  it.each([
    ['where no costs are given', undefined],
    // About 100,000 an item-year before, most of it failures, whose share may be a fifth less or more since.
    ['where the costs do not tell', { plannedMinor: 2_000, failureMinor: 40_000 }],
  ])('is judged by failures and planned work %s', (_, given) => {
    const differences = { aim: 'spare', ...(given && { costs: given }) } as const;
    const same = followUp(input({ ...differences, base: base(300, 600), after: after(50, 20) }))!;
    expect(same.word).toBe('helped');
    expect(same.sentence).toMatch(/^It helped: less planned work, and about as many fail\./);
    const noLess = followUp(input({ ...differences, base: base(300, 120), after: after(50, 20) }))!;
    expect(noLess.word).toBe('no-difference');
  });

  it('made it worse when more fail and no costs are given to weigh them by', () => {
    expect(wordOf({ aim: 'spare', base: base(300, 600), after: after(90) })).toBe('worse');
    expect(wordOf({ aim: 'spare', base: base(6), after: after(1) })).toBe('too-early');
  });
});

it.each([
  [null, 365, 'prevent'],
  [730, 365, 'prevent'],
  [365, 730, 'spare'],
  [365, null, 'spare'],
] as const)('from %s to %s days is to %s', (from, to, aim) => {
  expect(aimOf({ from, to })).toBe(aim);
});

it('compares a trial with the rest of the class, and says so', () => {
  const result = followUp(
    input({
      aim: 'spare',
      against: 'rest',
      base: { ...after(200), exposure: 30 * days },
      after: after(120),
    }),
  )!;
  expect(result.sentence).toContain('120 failures in 20 item-years on trial, 200 failures');
  expect(result.sentence).toContain('in the rest of the class over the same time');
});

it('says how much longer a trial takes, beside which the rest goes on', () => {
  // 20 and 60 item-years a year, half a year gone by, one failure an item-year all together:
  // (1/20 + 1/60) / (ln 1.5 / 1.645)² = 1.097 years, less the half.
  const differences = {
    aim: 'spare',
    against: 'rest',
    base: { ...after(30), exposure: 30 * days },
    after: { ...after(10), exposure: 10 * days },
  } as const;
  expect(followUp(input(differences))!.sentence).toContain('in about 8 months');
  const quiet = followUp(
    input({
      ...differences,
      base: { ...differences.base, failures: 0 },
      after: { ...differences.after, failures: 0 },
    }),
  )!;
  expect(quiet.word).toBe('too-early');
  expect(quiet.sentence).not.toContain('If nothing changed');
});

it('has nothing to say before any running time', () => {
  expect(followUp(input({ after: { ...after(0), exposure: 0 } }))).toBeNull();
});

it('counts what happened within a period: its start taken in, its end left out', () => {
  const position = aPosition({
    watchTo: 1000,
    events: [
      anEvent(100, 'failure-renewed'),
      anEvent(200, 'planned-renewal'),
      anEvent(300, 'failure-patched'),
      anEvent(400, 'planned-renewal'),
    ],
  });
  expect(followUpPeriod([position], 100, 300)).toEqual({
    from: 100,
    to: 300,
    failures: 1,
    plannedRenewals: 1,
    exposure: 200,
  });
  expect(followUpPeriod([position], 300, 2000)).toMatchObject({
    failures: 1,
    plannedRenewals: 1,
    exposure: 700,
  });
});
