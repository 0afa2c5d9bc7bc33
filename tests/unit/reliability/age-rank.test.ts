import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ageRankTest } from '~/reliability/age-rank';
import { forEachAgeRiskSet } from '~/reliability/age-risk-sets';
import type { Position } from '~/reliability/position';
import { dutyUsage, type Usage } from '~/reliability/usage';
import { anEvent, aPosition } from '../../support/position';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

/** Positions fitted so many days before the watch opens on day 0. */
const ofAges = (...ages: number[]) =>
  ages.map((age, index) => aPosition({ id: `p${index}`, inServiceAt: -1000, fittedAt: -age }));

function withEvents(
  positions: Position[],
  index: number,
  ...events: Position['events'][number][]
): Position[] {
  return positions.map((position, i) => (i === index ? { ...position, events } : position));
}

/** The same test by sorting every age at every failure, from the definition. */
function bySorting(positions: readonly Position[]): { share: number; variance: number }[] {
  const marks: { share: number; variance: number }[] = [];
  forEachAgeRiskSet(positions, ({ failedAge, ages, counts, groups }) => {
    const all = Array.from({ length: groups }, (_, i) =>
      Array<number>(counts[i] ?? 0).fill(ages[i] ?? NaN),
    ).flat();
    const midrank = (age: number) =>
      (all.filter((a) => a < age).length + all.filter((a) => a === age).length / 2) / all.length;
    const ranks = all.map(midrank);
    const variance = ranks.reduce((sum, rank) => sum + (rank - 0.5) ** 2, 0) / ranks.length;
    marks.push({ share: midrank(failedAge), variance });
  });
  return marks;
}

describe('age-rank test', () => {
  it('puts a mark at the share of younger peers, itself counted half', () => {
    const test = ageRankTest(withEvents(ofAges(100, 200, 300, 400), 2, anEvent(50)));
    expect(test.marks).toEqual([
      { at: 50, positionId: 'p2', mode: null, share: 0.625, size: 4, variance: 15 / 192 },
    ]);
    expect(test.meanShare).toBe(0.625);
    expect(test.z).toBeCloseTo(0.125 / Math.sqrt(15 / 192), 12);
  });

  it('shares a tie', () => {
    const test = ageRankTest(withEvents(ofAges(100, 100, 300), 0, anEvent(50)));
    expect(test.marks[0]?.share).toBeCloseTo(1 / 3, 12);
    expect(test.marks[0]?.variance).toBeCloseTo((27 - 9) / (12 * 27), 12);
  });

  it('counts failures that carry no weight and asks nothing of them', () => {
    const test = ageRankTest(withEvents(ofAges(100, 100), 0, anEvent(50)));
    expect(test).toMatchObject({ weightless: 1, z: null, pTwoSided: null, meanShare: null });
  });

  it('leaves out and counts failures of unknown age, and keeps unknown peers out of the ranks', () => {
    const unknown = aPosition({ id: 'unknown', inServiceAt: -1000, events: [anEvent(40)] });
    const test = ageRankTest([...withEvents(ofAges(100, 200), 1, anEvent(30)), unknown]);
    expect(test.marks.map(({ size }) => size)).toEqual([2]);
    expect(test.unknownAge).toBe(1);
  });

  it('shows two failures of one day the state before the day', () => {
    const base = ofAges(100, 200, 300);
    const both = withEvents(withEvents(base, 0, anEvent(50)), 2, anEvent(50));
    expect(ageRankTest(both).marks.map(({ share, size }) => [share, size])).toEqual([
      [0.5 / 3, 3],
      [2.5 / 3, 3],
    ]);
  });

  it('ranks an item that failed on the day it was fitted among the youngest, in its position’s place', () => {
    const twice = withEvents(ofAges(100, 200, 300), 2, anEvent(50), anEvent(50));
    expect(ageRankTest(twice).marks.map(({ share, size }) => [share, size])).toEqual([
      [2.5 / 3, 3],
      [0.5 / 3, 3],
    ]);
  });

  it('keeps one mode, among all peers', () => {
    const events = [anEvent(50, 'failure-patched', { mode: 'seal' }), anEvent(60, 'failure-patched')];
    const test = ageRankTest(withEvents(ofAges(100, 200), 1, ...events), { mode: 'seal' });
    expect(test.marks.map(({ at }) => at)).toEqual([50]);
  });

  it('agrees with sorting every age at every failure', () => {
    const random = seededRandom(21);
    const positions = simulateClass(random, { ...usualClass, shape: 2 }).map((position, index) =>
      index % 3 === 0 ? { ...position, usage: dutyUsage(8) } : position,
    );
    const expected = bySorting(positions);
    const { marks } = ageRankTest(positions);
    expect(marks.length).toBeGreaterThan(20);
    marks.forEach((mark, index) => {
      expect(mark.share).toBeCloseTo(expected[index]?.share ?? NaN, 12);
      expect(mark.variance).toBeCloseTo(expected[index]?.variance ?? NaN, 12);
    });
  });

  it('is the same in hours as in days, in any order, and with positions that were never watched', () => {
    fc.assert(
      fc.property(fc.integer(), fc.integer({ min: 1, max: 24 }), (seed, duty) => {
        const positions = simulateClass(seededRandom(seed), { ...usualClass, shape: 1.5 });
        const { z } = ageRankTest(positions);
        const inHours = positions.map((position) => ({ ...position, usage: dutyUsage(duty) }));
        const unwatched = aPosition({ id: 'never', watchTo: 0 });
        expect(ageRankTest(inHours).z).toBeCloseTo(z ?? NaN, 9);
        expect(ageRankTest(positions.toReversed()).z).toBeCloseTo(z ?? NaN, 9);
        expect(ageRankTest([...positions, unwatched])).toEqual(ageRankTest(positions));
      }),
      { numRuns: 30 },
    );
  });

  it('takes 100,000 positions with 1,000 failures in seconds of processor time', { timeout: 60_000 }, () => {
    const random = seededRandom(22);
    const day = (limit: number) => Math.floor(random() * limit);
    const positions = Array.from({ length: 100_000 }, (_, index): Position => {
      const events = index % 100 === 0 ? [anEvent(1 + day(999))] : [];
      const usage = dutyUsage(8);
      return aPosition({ id: `p${index}`, inServiceAt: -4000, fittedAt: -day(3000), events, usage });
    });
    const before = process.cpuUsage();
    expect(ageRankTest(positions).marks).toHaveLength(1000);
    const { user } = process.cpuUsage(before);
    expect(user / 1e6).toBeLessThan(4);
  });

  it('ranks by clock, not by calendar, where meters differ', () => {
    const slow: Usage = { at: (at) => at };
    const fast: Usage = { at: (at) => 10 * at };
    const [older, younger] = ofAges(200, 100);
    const positions = [
      { ...older!, usage: slow },
      { ...younger!, usage: fast, events: [anEvent(50)] },
    ];
    expect(ageRankTest(positions).marks[0]?.share).toBe(0.75);
  });
});
