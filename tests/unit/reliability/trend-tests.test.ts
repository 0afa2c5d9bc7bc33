import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { crowAmsaaSlope } from '~/reliability/crow-amsaa';
import type { History } from '~/reliability/history';
import { laplaceTest } from '~/reliability/laplace';
import { militaryHandbookTest } from '~/reliability/military-handbook';
import { expectClose } from '../../support/relative';

const history = fc
  .record({
    entry: fc.integer({ min: 0, max: 500 }),
    watched: fc.integer({ min: 1, max: 1000 }),
    shares: fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 1, maxLength: 4 }),
  })
  .map(({ entry, watched, shares }): History => {
    const failures = shares.map((share) => entry + (watched * share) / 100).sort((a, b) => a - b);
    return { entry, exit: entry + watched, failures };
  });
const histories = fc.array(history, { minLength: 1, maxLength: 10 });

const scaledBy = (unit: number, given: readonly History[]): History[] =>
  given.map(({ entry, exit, failures }) => ({
    entry: entry * unit,
    exit: exit * unit,
    failures: failures.map((time) => time * unit),
  }));

describe('Laplace and military-handbook tests', () => {
  it('say nothing without a failure', () => {
    const silent = [{ entry: 0, exit: 10, failures: [] }];
    expect(laplaceTest(silent)).toBeNull();
    expect(militaryHandbookTest(silent)).toBeNull();
    expect(laplaceTest([])).toBeNull();
  });

  it('let each position have a window and a rate of its own', () => {
    // One failure in the middle of each window: no trend at all.
    const middle = [
      { entry: 0, exit: 10, failures: [5] },
      { entry: 900, exit: 1100, failures: [1000, 1000, 1000] },
    ];
    expect(laplaceTest(middle)).toMatchObject({ u: 0, pTwoSided: 1, pRising: 0.5, failures: 4 });
  });

  it('take failures tied at the very end', () => {
    const tied = [{ entry: 0, exit: 10, failures: [10, 10, 10] }];
    expect(laplaceTest(tied)?.u).toBeCloseTo(3, 12);
    expect(militaryHandbookTest(tied)).toMatchObject({ x: 0, pRising: 0, pFalling: 1 });
  });

  it('do not mind unit or order, or positions without failures', () => {
    fc.assert(
      fc.property(histories, fc.constantFrom(1e-6, 24, 1e9), (given, unit) => {
        const [u, x] = [laplaceTest(given)?.u, militaryHandbookTest(given)?.x];
        expect(Math.abs((laplaceTest(scaledBy(unit, given))?.u ?? NaN) - (u ?? NaN))).toBeLessThan(1e-9);
        expect(Math.abs((militaryHandbookTest(scaledBy(unit, given))?.x ?? NaN) - (x ?? NaN))).toBeLessThan(
          1e-8,
        );
        expect(laplaceTest(given.toReversed())).toEqual(laplaceTest(given));
        expect(militaryHandbookTest(given.toReversed())).toEqual(militaryHandbookTest(given));
        const silent = { entry: 3, exit: 20_000, failures: [] };
        expect(laplaceTest([...given, silent])?.u).toBeCloseTo(u ?? NaN, 9);
      }),
    );
  });
});

describe('closed-form slope', () => {
  it('holds only for equal windows from age 0', () => {
    expect(crowAmsaaSlope([{ entry: 1, exit: 10, failures: [5] }])).toBeNull();
    expect(
      crowAmsaaSlope([
        { entry: 0, exit: 10, failures: [5] },
        { entry: 0, exit: 9, failures: [] },
      ]),
    ).toBeNull();
    expect(crowAmsaaSlope([{ entry: 0, exit: 10, failures: [] }])).toBeNull();
    expect(crowAmsaaSlope([{ entry: 0, exit: 10, failures: [10, 10] }])).toBeNull();
    expect(crowAmsaaSlope([])).toBeNull();
  });

  it('pools positions', () => {
    const slope = crowAmsaaSlope([
      { entry: 0, exit: 10, failures: [5] },
      { entry: 0, exit: 10, failures: [2.5] },
    ]);
    expectClose(slope?.shape, 2 / Math.log(8), 1e-12);
    // Expected failures of both positions by the end of the window are those that were seen.
    expectClose((slope?.intensity ?? NaN) * 10 ** (slope?.shape ?? NaN) * 2, 2, 1e-12);
  });
});
