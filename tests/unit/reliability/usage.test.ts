import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dutyUsage, meteredUsage } from '~/reliability/usage';

describe('metered usage', () => {
  const usage = meteredUsage(
    [
      { at: 10, hours: 100 },
      { at: 20, hours: 180 },
      { at: 30, hours: 180 },
    ],
    6,
  );

  it('runs straight between readings and at the duty outside them', () => {
    expect([5, 10, 15, 20, 25, 30, 32].map(usage.at)).toEqual([70, 100, 140, 180, 180, 180, 192]);
  });

  it('falls back on the duty without readings', () => {
    expect(meteredUsage([], 6).at(4) - meteredUsage([], 6).at(1)).toBe(18);
    expect(meteredUsage([], 6).steadyUnitsPerDay).toBe(6);
    expect(meteredUsage([{ at: 3, hours: 9 }], 6).at(4)).toBe(15);
  });

  it('never goes back', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.integer({ min: 0, max: 50 }), fc.integer({ min: 0, max: 500 })), {
          maxLength: 8,
        }),
        fc.double({ min: -100, max: 600, noNaN: true }),
        fc.double({ min: 0, max: 100, noNaN: true }),
        (steps, from, later) => {
          let [at, hours] = [0, 0];
          const knots = steps.map(([days, more]) => ({ at: (at += days), hours: (hours += more) }));
          const { at: clock } = meteredUsage(knots, 8);
          expect(clock(from + later)).toBeGreaterThanOrEqual(clock(from) - 1e-9);
        },
      ),
    );
  });

  it('refuses what cannot be', () => {
    expect(() =>
      meteredUsage(
        [
          { at: 1, hours: 5 },
          { at: 2, hours: 4 },
        ],
        8,
      ),
    ).toThrow(RangeError);
    expect(() =>
      meteredUsage(
        [
          { at: 2, hours: 5 },
          { at: 1, hours: 6 },
        ],
        8,
      ),
    ).toThrow(RangeError);
    expect(() => dutyUsage(0)).toThrow(RangeError);
    expect(() => meteredUsage([], 25)).toThrow(RangeError);
  });
});
