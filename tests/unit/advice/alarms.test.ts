import { alarmAction } from '~/advice/alarm-words';
import { describe, expect, it } from 'vitest';
import { advanceAlarmState, alarmFindings } from '~/advice/advance-alarm-state';
import { alarmFindingsSchema, alarmKinds, alarmStateSchema, type AlarmState } from '~/advice/alarm-findings';
import { alarmEvidence } from '~/advice/alarm-words';
import { Fingerprint } from '~/advice/fingerprint';
import { raiseAlarms, type AlarmCandidate, type StandingAlarms } from '~/advice/raise-alarms';
import type { Position, PositionEvent } from '~/reliability/position';
import { aPosition, anEvent } from '../../support/position';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

/** The class as it stood at the end of a day. */
function asOf(positions: readonly Position[], day: number): Position[] {
  return positions.map((position) => ({
    ...position,
    watchTo: Math.min(position.watchTo, day),
    events: position.events.filter(({ at }) => at < day),
  }));
}

/** What the database gives back of what was stored. */
const stored = (state: AlarmState) => alarmStateSchema.parse(JSON.parse(JSON.stringify(state)));

/** A state with a mark that only a continued computation carries on. */
const marked = (state: AlarmState): AlarmState => ({
  ...state,
  trend: { ...state.trend, sum: state.trend.sum + 1000 },
});
const continues = (previous: AlarmState, positions: readonly Position[]) =>
  advanceAlarmState(marked(previous), positions).trend.sum > 900;

const wearing = simulateClass(seededRandom(3), { ...usualClass, shape: 2.5, renewalAgeDays: 1000 });
const wholeDays = wearing.map((position) => ({
  ...position,
  fittedAt: Math.floor(position.fittedAt ?? 0),
  events: position.events.map((event) => ({ ...event, at: Math.floor(event.at) })),
}));

describe('the state of the alarms', () => {
  it.each([
    ['times of day', wearing],
    ['days only', wholeDays],
  ])('night by night is to the last bit what it is from scratch (%s)', (_, positions) => {
    let state: AlarmState | null = null;
    let nights = 0;
    for (let day = 10; day <= 1096; day += 7) {
      state = stored(advanceAlarmState(state, asOf(positions, day)));
      expect(state).toEqual(stored(advanceAlarmState(null, asOf(positions, day))));
      nights += 1;
    }
    expect(nights).toBeGreaterThan(150);
    expect(state?.trend.failures).toBeGreaterThan(20);
    expect(alarmFindings(state!).logE['old-first']).toBeGreaterThan(Math.log(20));
  });

  it('takes in only what is new while the past stands', () => {
    const before = advanceAlarmState(null, asOf(wearing, 800));
    expect(continues(before, asOf(wearing, 900))).toBe(true);
    expect(continues(before, asOf(wearing, 800))).toBe(true);
  });

  describe('is computed from scratch when the past is not what it was:', () => {
    const before = advanceAlarmState(null, asOf(wearing, 800));
    const withEvents = (
      index: number,
      change: (events: readonly PositionEvent[]) => readonly PositionEvent[],
    ) =>
      asOf(wearing, 900).map((position, place) =>
        place === index ? { ...position, events: change(position.events) } : position,
      );
    const failing = wearing.findIndex(({ events }) =>
      events.some(({ at, kind }) => at < 800 && kind === 'failure-renewed'),
    );

    it.each([
      ['a failure voided', withEvents(failing, (events) => events.slice(1))],
      ['a failure entered late', withEvents(0, (events) => [anEvent(5), ...events])],
      [
        'a failure moved by a day',
        withEvents(failing, ([first, ...rest]) => [{ ...first!, at: first!.at + 1 }, ...rest]),
      ],
      // Moves no failure and no exposure: only ages.
      [
        'a planned renewal entered late',
        withEvents(failing, (events) => [anEvent(0.5, 'planned-renewal'), ...events]),
      ],
      ['an earlier night', asOf(wearing, 500)],
      ['a position with a longer past', [...asOf(wearing, 900), aPosition({ id: 'more', watchTo: 900 })]],
    ])('%s', (_, positions) => {
      expect(continues(before, positions)).toBe(false);
      expect(advanceAlarmState(stored(before), positions)).toEqual(advanceAlarmState(null, positions));
    });

    it('a failure on a day taken in already', () => {
      const one = [
        aPosition({ watchTo: 500, events: [anEvent(100), anEvent(300)] }),
        aPosition({ id: 'b', watchTo: 500 }),
      ];
      const previous = advanceAlarmState(null, one);
      const later = [one[0]!, { ...one[1]!, watchTo: 600, events: [anEvent(300)] }];
      expect(continues(previous, later)).toBe(false);
      expect(advanceAlarmState(previous, later)).toEqual(advanceAlarmState(null, later));
    });

    it('a void and its undoing end where they began', () => {
      const all = asOf(wearing, 900);
      const whole = advanceAlarmState(null, all);
      const without = advanceAlarmState(
        stored(whole),
        withEvents(failing, (events) => events.slice(1)),
      );
      expect(without).not.toEqual(whole);
      expect(advanceAlarmState(stored(without), all)).toEqual(whole);
    });
  });

  it('gives the worked set of twelve failures its E', () => {
    // Source: computed once with numpy from the formula of the test martingale.
    const days = [310, 520, 640, 720, 810, 870, 930, 975, 1010, 1040, 1075, 1100];
    const positions = [aPosition({ watchTo: 1200, events: days.map((day) => anEvent(day)) })];
    const findings = alarmFindingsSchema.parse(alarmFindings(advanceAlarmState(null, positions)));
    expect(Math.exp(findings.logE['rate-rising'])).toBeCloseTo(29.0485, 4);
    expect(Math.exp(findings.logE['rate-falling'])).toBeCloseTo(0.0770427, 7);
    expect(findings.failures).toEqual({ rate: 12, age: 12 });
  });

  it('says nothing without a failure, and leaves items of unknown age to the rate alone', () => {
    expect(alarmFindings(advanceAlarmState(null, [])).logE).toEqual({
      'rate-rising': 0,
      'rate-falling': 0,
      'old-first': 0,
      'young-first': 0,
    });
    const unknown = aPosition({ inServiceAt: -500, events: [anEvent(100), anEvent(200)] });
    expect(alarmFindings(advanceAlarmState(null, [unknown])).failures).toEqual({ rate: 2, age: 1 });
  });
});

describe('the fingerprint', () => {
  it('changes with every bit, with order, and where one text ends and the next begins', () => {
    const of = (fill: (print: Fingerprint) => void) => {
      const print = new Fingerprint();
      fill(print);
      return print.digest();
    };
    const prints = [
      of(() => undefined),
      of((print) => print.addNumber(0)),
      of((print) => print.addNumber(1)),
      of((print) => print.addNumber(1 + Number.EPSILON)),
      of((print) => print.addNumber(-1)),
      of((print) => print.addText('ab')),
      of((print) => print.addText('ba')),
      of((print) => (print.addText('a'), print.addText('b'))),
    ];
    expect(new Set(prints).size).toBe(prints.length);
    for (const print of prints) expect(print).toMatch(/^[0-9a-f]{16}$/);
    expect(of((print) => print.addNumbers(Float64Array.of(1, 2, 3), 2))).toBe(
      of((print) => (print.addNumber(1), print.addNumber(2))),
    );
  });

  it('tells 20,000 neighbouring numbers apart', () => {
    const prints = Array.from({ length: 20_000 }, (_, index) => {
      const print = new Fingerprint();
      print.addNumber(index / 8);
      return print.digest();
    });
    expect(new Set(prints).size).toBe(20_000);
  });
});

const never: StandingAlarms = { open: new Set(), logEAtClearing: {} };

function candidate(classId: string, e: number, standing: StandingAlarms = never): AlarmCandidate {
  const logE = { 'rate-rising': Math.log(e), 'rate-falling': 0, 'old-first': 0, 'young-first': 0 };
  return { classId, alarms: { failures: { rate: 12, age: 7 }, logE }, standing };
}
const others = (count: number) => Array.from({ length: count }, (_, index) => candidate(`other-${index}`, 1));
const raisedIds = (candidates: readonly AlarmCandidate[]) =>
  raiseAlarms(candidates).map(({ classId }) => classId);

describe('raising', () => {
  it('takes E of 20 for a class alone, and more among many', () => {
    expect(raisedIds([candidate('a', 19.9)])).toEqual([]);
    expect(raiseAlarms([candidate('a', 20)])).toMatchObject([
      { classId: 'a', kind: 'rate-rising', failures: 12 },
    ]);
    expect(raisedIds([candidate('a', 199), ...others(9)])).toEqual([]);
    expect(raisedIds([candidate('a', 200), ...others(9)])).toEqual(['a']);
    // Two of ten need 10/(0.05·2) = 100 each.
    expect(raisedIds([candidate('a', 101), candidate('b', 100), ...others(8)])).toEqual(['a', 'b']);
  });

  it('raises no second alarm while one is open, which still counts among the claims made', () => {
    const open: StandingAlarms = { open: new Set(['rate-rising']), logEAtClearing: {} };
    expect(raisedIds([candidate('a', 1e6, open)])).toEqual([]);
    expect(raisedIds([candidate('a', 1e6, open), candidate('b', 100), ...others(8)])).toEqual(['b']);
    expect(raisedIds([candidate('b', 100), ...others(9)])).toEqual([]);
  });

  it('counts only evidence since the last clearing', () => {
    const cleared: StandingAlarms = { open: new Set(), logEAtClearing: { 'rate-rising': Math.log(50) } };
    expect(raisedIds([candidate('a', 50, cleared)])).toEqual([]);
    expect(raisedIds([candidate('a', 999, cleared)])).toEqual([]);
    const [again] = raiseAlarms([candidate('a', 1000, cleared)]);
    expect(again?.logE).toBeCloseTo(Math.log(20), 12);
    expect(again?.logETotal).toBeCloseTo(Math.log(1000), 12);
  });

  it('takes each kind as a family of its own', () => {
    const logE = { 'rate-rising': 4, 'rate-falling': -9, 'old-first': 5, 'young-first': -9 };
    const raised = raiseAlarms([
      { classId: 'a', alarms: { failures: { rate: 12, age: 7 }, logE }, standing: never },
    ]);
    expect(raised.map(({ kind, failures }) => [kind, failures])).toEqual([
      ['rate-rising', 12],
      ['old-first', 7],
    ]);
    expect(alarmKinds).toHaveLength(4);
  });

  it('leaves memoryless classes alone through three years of nights, and finds wearing ones', () => {
    const ever = (shape: number, seed: number) => {
      const positions = simulateClass(seededRandom(seed), { ...usualClass, shape });
      let state: AlarmState | null = null;
      for (let day = 30; day <= 1096; day += 30) {
        state = advanceAlarmState(state, asOf(positions, day));
        const alarms = alarmFindings(state);
        if (raiseAlarms([{ classId: 'a', alarms, standing: never }]).some(({ kind }) => kind === 'old-first'))
          return true;
      }
      return false;
    };
    const share = (shape: number, runs: number) =>
      Array.from({ length: runs }, (_, index) => ever(shape, 1000 + index)).filter(Boolean).length / runs;
    expect(share(1, 60)).toBeLessThanOrEqual(0.05);
    expect(share(2, 20)).toBeGreaterThanOrEqual(0.95);
  });
});

it('says in words how strong the evidence is', () => {
  expect(alarmEvidence({ logE: Math.log(29.05), failures: 12 })).toMatch(
    /^12 failures are behind it\. .*at most 1 in 29;/,
  );
  expect(alarmEvidence({ logE: Math.log(20), failures: 1 })).toMatch(
    /^1 failure is behind it\. .*at most 1 in 20;/,
  );
  expect(alarmEvidence({ logE: 5000, failures: 9 })).toContain('under 1 in 1\u202f000\u202f000;');
});

describe('what an alarm asks for', () => {
  it('defers to the licensed person where law or people are concerned, whatever the alarm', () => {
    for (const kind of alarmKinds) {
      expect(alarmAction(kind, true)).toMatch(/licensed person.*local code/);
      expect(alarmAction(kind, false)).not.toMatch(/licensed/);
    }
  });
});
