import { describe, expect, it } from 'vitest';
import { livePosition, type PositionWorld } from '../../../fixtures/demo/position-life';
import { openRandom } from '../../../fixtures/demo/random';
import type { ClassTruth } from '../../../fixtures/demo/truth';

const truth: ClassTruth = {
  className: 'Test item',
  truthKind: 'wears',
  scaleUnit: 'days',
  hazards: [{ shape: 2, scale: 400, modes: { Broken: 1 } }],
  expectedVerdict: 'wear-out',
  expectedCautions: [],
};
const world: PositionWorld = {
  truth,
  factor: 1,
  pace: 1,
  patchedShare: 0,
  renewal: null,
  outside: undefined,
  findingDays: null,
};
const live = (changes: Partial<PositionWorld>, toDay = 400_000) =>
  livePosition({ ...world, ...changes }, 0, toDay, openRandom(3, 'test'));
const constant = { ...truth, hazards: [{ shape: 1, scale: 100, modes: { Broken: 1 } }] };

describe('a position’s life', () => {
  it('has lives of the Weibull mean η Γ(1 + 1/β)', () => {
    const events = live({});
    const meanLife = events.at(-1)!.day / events.length;
    // Γ(1.5) = √π/2; about 1,100 lives of standard deviation 0.52 of the mean.
    expect(meanLife).toBeGreaterThan(0.95 * 400 * (Math.sqrt(Math.PI) / 2));
    expect(meanLife).toBeLessThan(1.05 * 400 * (Math.sqrt(Math.PI) / 2));
  });

  it('counts its life in hours where it runs some hours a day', () => {
    const perDay = live({ truth: constant, pace: 10 }).length / 400_000;
    expect(perDay).toBeGreaterThan(0.085);
    expect(perDay).toBeLessThan(0.1);
  });

  it('renews at the interval, and a patched item goes on at its age', () => {
    const renewal = { interval: 200, early: 0, late: 0, postponedShare: 0, postponedBy: 0 };
    const planned = live({ truth, factor: 0, renewal });
    expect(planned.length).toBeGreaterThan(1900);
    expect(planned.every(({ kind, renewed }) => kind === 'planned-renewal' && renewed)).toBe(true);
    const patched = live({ patchedShare: 1 }, 4000);
    expect(patched.every(({ renewed, itemFittedDay }) => !renewed && itemFittedDay === 0)).toBe(true);
    // Cumulative hazard of an item that is never renewed: (4000/400)².
    expect(patched.length).toBeGreaterThan(70);
    expect(patched.length).toBeLessThan(130);
  });

  it('fails as often as the truth says after a change of the rate', () => {
    const events = live({ truth: { ...constant, rateChange: { day: 200_000, factor: 3 } } });
    const before = events.filter(({ day }) => day < 200_000).length;
    expect((events.length - before) / before).toBeGreaterThan(2.7);
    expect((events.length - before) / before).toBeLessThan(3.2);
  });

  it('shows a hidden failure on the next finding day, and at most one event a day', () => {
    const findingDays = Array.from({ length: 400 }, (_, index) => 30 * index);
    const events = live({ findingDays }, 11_000);
    expect(events.length).toBeGreaterThan(10);
    expect(events.every(({ day }) => day % 30 === 0)).toBe(true);
    const many = live(
      { truth: { ...constant, hazards: [{ shape: 1, scale: 0.2, modes: { Broken: 1 } }] } },
      300,
    );
    expect(new Set(many.map(({ day }) => day)).size).toBe(many.length);
  });
});
