import { describe, expect, test } from 'vitest';
import { ageReplacementCostRate, bestAgeReplacement } from '~/reliability/age-replacement';
import { bestBlockReplacement } from '~/reliability/block-replacement';
import { approximateFailureFindingInterval, failureFindingInterval } from '~/reliability/failure-finding';
import { bestMinimalRepairInterval, minimalRepairCostRate } from '~/reliability/minimal-repair';
import { weibullRenewalFunction } from '~/reliability/renewal-function';

describe('age replacement, T*/η and C(T*)/C(∞)', () => {
  // Source: R optimize and integrate on the cost rate of Barlow & Hunter 1960.
  test.each([
    [1.5, 5, 0.675492, 0.890341],
    [1.5, 10, 0.378144, 0.749425],
    [2, 2, 1.090797, 0.966694],
    [2, 5, 0.510655, 0.72409],
    [2, 10, 0.336451, 0.53671],
    [3, 2, 0.810342, 0.879568],
    [3, 5, 0.50261, 0.541395],
    [3, 10, 0.382456, 0.352669],
  ])('shape %f, cost ratio %f', (shape, ratio, best, costShare) => {
    const life = { shape, scale: 1 };
    const costs = { planned: 1, failure: ratio };
    const interval = bestAgeReplacement(life, costs);
    expect(interval).toBeCloseTo(best, 6);
    const share = ageReplacementCostRate(interval, life, costs) / ageReplacementCostRate(null, life, costs);
    expect(share).toBeCloseTo(costShare, 6);
  });
});

describe('minimal repair, T*/η', () => {
  // Source: closed form of Barlow & Hunter 1960, policy II.
  test.each([
    [2, 5, 0.447214],
    [2.5, 4, 0.488359],
  ])('shape %f, cost ratio %f', (shape, ratio, best) => {
    const costs = { planned: 1, failure: ratio };
    expect(bestMinimalRepairInterval({ shape, scale: 1 }, costs)).toBeCloseTo(best, 6);
  });

  test('its cost rate by hand: (1 + 5·0.25)/0.5 = 4.5', () => {
    expect(minimalRepairCostRate(0.5, { shape: 2, scale: 1 }, { planned: 1, failure: 5 })).toBe(4.5);
  });
});

describe('failure finding, T/θ', () => {
  // Source: R uniroot on (1 − e^(−x))/x = A.
  test.each([
    [0.9, 0.214556],
    [0.95, 0.103479],
    [0.99, 0.0201345],
  ])('availability %f', (availability, ratio) => {
    expect(failureFindingInterval(availability, 1)).toBeCloseTo(ratio, 6);
    expect(approximateFailureFindingInterval(availability, 1)).toBeCloseTo(2 * (1 - availability), 12);
  });
});

describe('renewal function', () => {
  // Source: numerical renewal equation (Xie 1989); for the exponential M(t) = t/θ.
  test.each([
    [2, 0.5, 0.2308],
    [2, 1, 0.7537],
    [2, 2, 1.894],
    [1, 2, 2],
  ])('shape %f at %f η', (shape, time, expected) => {
    expect(weibullRenewalFunction({ shape, scale: 1 }, time)).toBeCloseTo(expected, 4);
  });
});

test('block replacement with a renewal function known in closed form', () => {
  // For failures far dearer than renewals M(T) → (T/η)^β, where T* is that of minimal repair (closed form).
  const costs = { planned: 1, failure: 1e6 };
  const closed = bestMinimalRepairInterval({ shape: 3, scale: 100 }, costs) ?? NaN;
  const best = bestBlockReplacement({ shape: 3, scale: 100 }, costs);
  expect(best?.interval).toBeCloseTo(closed, 3);
  expect(best?.costRate).toBeCloseTo((1 + 0.5) / closed, 4);
});
