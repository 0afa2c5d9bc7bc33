import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  ageAlarm,
  appendToAgeAlarm,
  emptyAgeAlarm,
  type AgeAlarmState,
  type FailureAmongPeers,
} from '~/reliability/age-alarm';
import { eBenjaminiHochberg } from '~/reliability/e-benjamini-hochberg';
import {
  appendToTrendAlarm,
  emptyTrendAlarm,
  rebuildTrendAlarm,
  trendAlarm,
} from '~/reliability/trend-alarm';
import { seededRandom } from '../../support/seeded-random';

describe('trend alarm', () => {
  const exposures = fc
    .array(fc.integer({ min: 1, max: 400 }), { maxLength: 80 })
    .map((days) => days.sort((a, b) => a - b));

  test('says nothing before the second failure', () => {
    expect(trendAlarm(emptyTrendAlarm)).toMatchObject({ failures: 0, sum: 0, rising: { e: 1, logE: 0 } });
    expect(trendAlarm(rebuildTrendAlarm([5]))).toMatchObject({
      failures: 1,
      sum: 0,
      falling: { e: 1 },
    });
  });

  test('nightly appending from stored state gives the same bits as a rebuild', () => {
    fc.assert(
      fc.property(exposures, fc.nat(80), (days, split) => {
        const failures = days.map((day) => day * 30.7);
        const stored = JSON.stringify(rebuildTrendAlarm(failures.slice(0, split)));
        let state = JSON.parse(stored) as typeof emptyTrendAlarm;
        for (const failure of failures.slice(split)) state = appendToTrendAlarm(state, failure);
        expect(trendAlarm(state)).toEqual(trendAlarm(rebuildTrendAlarm(failures)));
      }),
    );
  });

  test('ever reaches 20 in fewer than one in twenty steady classes, and soon when the slope is 2', () => {
    const random = seededRandom(5);
    const reaches = (slope: number, failures: number): boolean => {
      let state = emptyTrendAlarm;
      let hazard = 0;
      for (let failure = 0; failure < failures; failure += 1) {
        hazard -= Math.log(1 - random());
        state = appendToTrendAlarm(state, hazard ** (1 / slope));
        if (trendAlarm(state).rising.e >= 20) return true;
      }
      return false;
    };
    const share = (slope: number) =>
      Array.from({ length: 600 }, () => reaches(slope, 100)).filter(Boolean).length / 600;
    expect(share(1)).toBeLessThan(0.05);
    expect(share(2)).toBeGreaterThan(0.98);
  });

  test('does not depend on the unit and stays finite', () => {
    fc.assert(
      fc.property(exposures, fc.constantFrom(1e-9, 1e-3, 24, 1e9), (days, unit) => {
        const base = trendAlarm(rebuildTrendAlarm(days));
        const scaled = trendAlarm(rebuildTrendAlarm(days.map((day) => day * unit)));
        expect(scaled.sum).toBeCloseTo(base.sum, 9);
        for (const alarm of [scaled.rising, scaled.falling]) {
          expect(Number.isFinite(alarm.logE) && Number.isFinite(alarm.e)).toBe(true);
        }
      }),
    );
  });

  test('keeps E as a finite number when ln E leaves the range', () => {
    const alarm = trendAlarm(rebuildTrendAlarm(Array.from({ length: 5000 }, (_, i) => 1e6 + i)));
    expect(alarm.rising.logE).toBeGreaterThan(1000);
    expect(alarm.rising.e).toBe(Number.MAX_VALUE);
    expect(alarm.falling.e).toBe(0);
  });

  test('refuses what would break it', () => {
    const state = rebuildTrendAlarm([10, 20]);
    for (const exposure of [15, 0, -1, NaN, Infinity]) {
      expect(() => appendToTrendAlarm(state, exposure)).toThrow(RangeError);
    }
  });
});

describe('age alarm', () => {
  const among = (failedAge: number, ages: readonly number[], halfResolution = 0.5): FailureAmongPeers => ({
    failedAge,
    halfResolution,
    groups: ages.length,
    ages,
    counts: ages.map(() => 1),
  });
  const fold = (failures: readonly FailureAmongPeers[], from: AgeAlarmState = emptyAgeAlarm) =>
    failures.reduce(appendToAgeAlarm, from);
  const failure = fc
    .tuple(fc.array(fc.nat(5000), { minLength: 1, maxLength: 12 }), fc.nat())
    .map(([ages, pick]) => among(ages[pick % ages.length] ?? 0, ages));
  const failures = fc.array(failure, { maxLength: 30 });

  test('one failure by hand: ages 1, 2, 3, the oldest failed', () => {
    const alarm = ageAlarm(fold([among(3, [1, 2, 3])]));
    const factor = (shape: number) => 3 ** (shape - 1) / ((1 + 2 ** (shape - 1) + 3 ** (shape - 1)) / 3);
    expect(alarm.oldFirst.e).toBeCloseTo((factor(1.25) + factor(1.5) + factor(2) + factor(3)) / 4, 12);
    expect(alarm.youngFirst.e).toBeLessThan(1);
  });

  test('is a fair bet: over which of the peers fails, the mean of E is 1', () => {
    fc.assert(
      fc.property(fc.array(fc.nat(5000), { minLength: 1, maxLength: 12 }), (ages) => {
        for (const side of ['oldFirst', 'youngFirst'] as const) {
          const es = ages.map((age) => ageAlarm(fold([among(age, ages)]))[side].e);
          expect(es.reduce((sum, e) => sum + e, 0) / ages.length).toBeCloseTo(1, 9);
        }
      }),
    );
  });

  test('nightly appending from stored state gives the same bits as a rebuild', () => {
    fc.assert(
      fc.property(failures, fc.nat(30), (all, split) => {
        const stored = JSON.parse(JSON.stringify(fold(all.slice(0, split)))) as AgeAlarmState;
        expect(ageAlarm(fold(all.slice(split), stored))).toEqual(ageAlarm(fold(all)));
      }),
    );
  });

  test('does not depend on the unit, and age 0 never reaches a power', () => {
    fc.assert(
      fc.property(failures, fc.constantFrom(1e-9, 24, 1e12), (all, unit) => {
        const scaled = all.map((one) => ({
          ...one,
          failedAge: one.failedAge * unit,
          halfResolution: one.halfResolution * unit,
          ages: Array.from(one.ages, (age) => age * unit),
        }));
        for (const side of ['oldFirst', 'youngFirst'] as const) {
          const logE = ageAlarm(fold(scaled))[side].logE;
          expect(Number.isFinite(logE)).toBe(true);
          expect(logE).toBeCloseTo(ageAlarm(fold(all))[side].logE, 8);
        }
      }),
    );
  });

  test('ages counted in groups weigh as if listed one by one', () => {
    const grouped = { failedAge: 9, halfResolution: 0.5, groups: 2, ages: [4, 9, 77], counts: [3, 2, 5] };
    const listed = ageAlarm(fold([among(9, [4, 4, 4, 9, 9])]));
    expect(ageAlarm(fold([grouped])).oldFirst.logE).toBeCloseTo(listed.oldFirst.logE, 14);
  });

  test('all ages equal say nothing', () => {
    expect(ageAlarm(fold([among(7, [7, 7, 7])])).oldFirst.e).toBeCloseTo(1, 14);
  });

  test('refuses what would break it', () => {
    expect(() => fold([among(-1, [1])])).toThrow(RangeError);
    expect(() => fold([among(1, [NaN])])).toThrow(RangeError);
    expect(() => fold([among(1, [])])).toThrow(RangeError);
    expect(() => fold([among(1, [1], 0)])).toThrow(RangeError);
  });
});

test('e-BH does not depend on the order and raises nothing below K/(αK)', () => {
  fc.assert(
    fc.property(fc.array(fc.double({ min: -5, max: 12, noNaN: true }), { maxLength: 30 }), (logEs) => {
      const raised = eBenjaminiHochberg(logEs, 0.05);
      const reversed = eBenjaminiHochberg(logEs.toReversed(), 0.05).reverse();
      expect(raised).toEqual(reversed);
      logEs.forEach((logE, index) => {
        if (raised[index]) expect(logE).toBeGreaterThanOrEqual(Math.log(20) - 1e-9);
      });
    }),
  );
  expect(() => eBenjaminiHochberg([1], 0)).toThrow(RangeError);
});
