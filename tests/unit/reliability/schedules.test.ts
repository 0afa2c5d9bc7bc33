import { seededRandom, weibullLife } from '../../support/seeded-random';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ageReplacementCostRate, bestAgeReplacement } from '~/reliability/age-replacement';
import { bestBlockReplacement, blockReplacementCostRate } from '~/reliability/block-replacement';
import { expectedFailuresAtConstantRate, expectedFailuresByAge } from '~/reliability/expected-failures';
import {
  approximateFailureFindingInterval,
  failureFindingInterval,
  meanAvailability,
} from '~/reliability/failure-finding';
import { bestMinimalRepairInterval } from '~/reliability/minimal-repair';
import { CountMixture } from '~/reliability/count-mixture';
import { FailuresToCome } from '~/reliability/failures-to-come';
import { quantileOfSample } from '~/reliability/quantile-of-sample';
import { drawCount, normalPairs, weibullDraws } from '~/reliability/quasi-random-draws';
import { weibullRenewalFunction } from '~/reliability/renewal-function';
import {
  ageReplacementPolicy,
  blockReplacementPolicy,
  costCurve,
  minimalRepairPolicy,
  scheduleValue,
} from '~/reliability/schedule-value';
import { silenceChance } from '~/reliability/silence';
import { sparesNeeded } from '~/reliability/spares';

const shape = fc.double({ min: 1.02, max: 12, noNaN: true });
const ratio = fc.double({ min: 1.05, max: 5000, noNaN: true });
const scale = fc.constantFrom(1e-6, 1, 900, 1e9);

describe('age replacement', () => {
  test('no interval near the best one is cheaper, and none beats it at all', () => {
    fc.assert(
      fc.property(shape, ratio, scale, (beta, r, eta) => {
        const life = { shape: beta, scale: eta };
        const costs = { planned: 130, failure: 130 * r };
        const best = bestAgeReplacement(life, costs);
        const rate = ageReplacementCostRate(best, life, costs);
        expect(Number.isFinite(rate)).toBe(true);
        for (const factor of [0.5, 0.9, 0.99, 1.01, 1.1, 2]) {
          const other = ageReplacementCostRate((best ?? 5 * eta) * factor, life, costs);
          expect(other).toBeGreaterThanOrEqual(rate * (1 - 1e-9));
        }
        expect(rate).toBeLessThanOrEqual(ageReplacementCostRate(null, life, costs) * (1 + 1e-9));
      }),
    );
  });

  test('the best interval scales with the unit', () => {
    fc.assert(
      fc.property(shape, ratio, (beta, r) => {
        const costs = { planned: 1, failure: r };
        const one = bestAgeReplacement({ shape: beta, scale: 1 }, costs);
        const scaled = bestAgeReplacement({ shape: beta, scale: 1e8 }, costs);
        if (one === null) expect(scaled).toBeNull();
        else expect((scaled ?? NaN) / 1e8 / one).toBeCloseTo(1, 12);
      }),
    );
  });

  test('none where nothing wears or a failure costs no more than a renewal', () => {
    expect(bestAgeReplacement({ shape: 1, scale: 5 }, { planned: 1, failure: 9 })).toBeNull();
    expect(bestAgeReplacement({ shape: 0.6, scale: 5 }, { planned: 1, failure: 9 })).toBeNull();
    expect(bestAgeReplacement({ shape: 3, scale: 5 }, { planned: 9, failure: 9 })).toBeNull();
    expect(bestAgeReplacement({ shape: 1.0001, scale: 5 }, { planned: 1, failure: 1.01 })).toBeNull();
  });

  test('a memoryless item costs C_f/θ − … more the more often it is renewed', () => {
    const life = { shape: 1, scale: 100 };
    const costs = { planned: 10, failure: 50 };
    const rates = [20, 50, 100, 400].map((interval) => ageReplacementCostRate(interval, life, costs));
    expect(rates).toEqual(rates.toSorted((a, b) => b - a));
    expect(rates.at(-1)).toBeGreaterThan(ageReplacementCostRate(null, life, costs));
  });
});

test('minimal repair has no best interval without wear-out', () => {
  expect(bestMinimalRepairInterval({ shape: 1, scale: 5 }, { planned: 1, failure: 2 })).toBeNull();
  expect(bestMinimalRepairInterval({ shape: 0.5, scale: 5 }, { planned: 1, failure: 2 })).toBeNull();
});

describe('block replacement', () => {
  test('costs no less than age replacement at the same prices (Barlow & Proschan 1965)', () => {
    for (const beta of [1.8, 2.5, 4]) {
      for (const failure of [3, 10, 80]) {
        const life = { shape: beta, scale: 700 };
        const costs = { planned: 1, failure };
        const age = ageReplacementCostRate(bestAgeReplacement(life, costs), life, costs);
        const block = bestBlockReplacement(life, costs);
        if (block !== null) expect(block.costRate).toBeGreaterThan(age);
      }
    }
  });

  test('none where running to failure is as cheap', () => {
    expect(bestBlockReplacement({ shape: 1, scale: 9 }, { planned: 1, failure: 9 })).toBeNull();
    expect(bestBlockReplacement({ shape: 2, scale: 9 }, { planned: 1, failure: 1.1 })).toBeNull();
  });

  test('expected failures agree with the renewal function at the best interval', () => {
    const life = { shape: 2.5, scale: 700 };
    const best = bestBlockReplacement(life, { planned: 1, failure: 8 });
    expect(best).not.toBeNull();
    expect(weibullRenewalFunction(life, best?.interval ?? 0)).toBeCloseTo(best?.expectedFailures ?? NaN, 5);
  });
});

test('failure finding: the exact interval gives the availability asked for and is the longer one', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.01, max: 0.999999, noNaN: true }), scale, (availability, theta) => {
      const interval = failureFindingInterval(availability, theta);
      expect(meanAvailability(interval, theta)).toBeCloseTo(availability, 10);
      expect(interval).toBeGreaterThan(approximateFailureFindingInterval(availability, theta));
    }),
  );
  expect(() => failureFindingInterval(1, 10)).toThrow(RangeError);
  expect(() => failureFindingInterval(0.9, 0)).toThrow(RangeError);
});

describe('fixed draws', () => {
  test('are standard normal, uncorrelated and the same every time', () => {
    const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
    expect(normalPairs).toHaveLength(drawCount);
    for (const axis of [0, 1] as const) {
      const values = normalPairs.map((pair) => pair[axis]);
      expect(mean(values)).toBeCloseTo(0, 1.7);
      expect(mean(values.map((value) => value * value))).toBeCloseTo(1, 1);
    }
    expect(Math.abs(mean(normalPairs.map(([a, b]) => a * b)))).toBeLessThan(0.03);
  });

  test('carry the covariance of the fit', () => {
    const fit = { shape: 2, scale: 900, covariance: { lnShape: 0.04, lnScale: 0.01, cross: -0.008 } };
    const draws = weibullDraws(fit);
    const logs = draws.map((draw) => [Math.log(draw.shape / 2), Math.log(draw.scale / 900)] as const);
    const moment = (value: (pair: readonly [number, number]) => number) =>
      logs.reduce((sum, pair) => sum + value(pair), 0) / logs.length;
    expect(moment(([a]) => a * a)).toBeCloseTo(0.04, 2);
    expect(moment(([, b]) => b * b)).toBeCloseTo(0.01, 3);
    expect(moment(([a, b]) => a * b)).toBeCloseTo(-0.008, 3);
    expect(weibullDraws(fit)).toEqual(draws);
  });

  test('refuse a covariance that is none', () => {
    const broken = { shape: 2, scale: 9, covariance: { lnShape: 0.04, lnScale: 0.01, cross: 0.5 } };
    expect(() => weibullDraws(broken)).toThrow(RangeError);
  });
});

describe('value of a schedule', () => {
  const fitOf = (beta: number, se: number) => ({
    shape: beta,
    scale: 900,
    covariance: { lnShape: se * se, lnScale: (se / beta) ** 2, cross: 0 },
  });
  const costs = { planned: 100, failure: 1000 };

  const policy = ageReplacementPolicy(costs);

  test('a sure wear-out on no schedule saves in nearly all draws', () => {
    const fit = fitOf(2.6, 0.1);
    const best = bestAgeReplacement(fit, costs) ?? NaN;
    const value = scheduleValue({ policy, currentInterval: null, fit, draws: weibullDraws(fit) }, [best]);
    const [change] = value.alternatives;
    expect(change?.saving).toBeGreaterThan(0);
    expect(change?.shareSaving).toBeGreaterThan(0.99);
    expect(change?.savingRange.lower).toBeLessThan(change?.saving ?? NaN);
    expect(change?.savingRange.upper).toBeGreaterThan(change?.saving ?? NaN);
    expect(value.bestIntervalRange.lower).toBeLessThan(best);
    expect(value.bestIntervalRange.upper).toBeGreaterThan(best);
    expect(value.today.costRate).toBe(ageReplacementCostRate(null, fit, costs));
  });

  test('a memoryless class on a schedule saves by stopping', () => {
    const fit = fitOf(1, 0.08);
    const question = { policy, currentInterval: 300, fit, draws: weibullDraws(fit) };
    const value = scheduleValue(question, [null]);
    expect(policy(fit).bestInterval()).toBeNull();
    expect(value.alternatives[0]?.saving).toBeGreaterThan(0);
    expect(value.alternatives[0]?.shareSaving).toBeGreaterThan(0.9);
    expect(value.bestIntervalRange.upper).toBeNull();
  });

  test('no change saves nothing', () => {
    const fit = fitOf(2, 0.2);
    const question = { policy, currentInterval: 400, fit, draws: weibullDraws(fit) };
    for (const same of [scheduleValue(question, []).today, ...scheduleValue(question, [400]).alternatives]) {
      expect(same).toMatchObject({ saving: 0, shareSaving: 0, savingRange: { lower: 0, upper: 0 } });
    }
  });

  test('the curve lies within its band', () => {
    const fit = fitOf(2, 0.2);
    const points = costCurve([50, 200, 400, 900, 2000], { policy, fit, draws: weibullDraws(fit) });
    expect(points).toHaveLength(5);
    for (const point of points) {
      expect(point.lower).toBeLessThan(point.costRate);
      expect(point.upper).toBeGreaterThan(point.costRate);
    }
  });

  test('group renewal is priced by the renewal function, quickly and closely', () => {
    for (const beta of [0.7, 1, 1.6, 2.5, 5]) {
      const life = { shape: beta, scale: 900 };
      const priced = blockReplacementPolicy(costs)(life);
      for (const interval of [20, 130, 400, 900, 2000, 5000]) {
        const failures = weibullRenewalFunction(life, interval, 1200);
        const exact = blockReplacementCostRate(interval, failures, costs);
        expect(priced.costRate(interval) / exact).toBeCloseTo(1, 1.7);
      }
      expect(priced.costRate(null)).toBeCloseTo(ageReplacementCostRate(null, life, costs), 12);
      const best = bestBlockReplacement(life, costs)?.interval ?? null;
      if (best === null) expect(priced.bestInterval()).toBeNull();
      else expect((priced.bestInterval() ?? NaN) / best).toBeCloseTo(1, 1.3);
    }
  });

  test('patched items without planned renewal are priced at the ages they have', () => {
    const life = { shape: 2, scale: 900 };
    const priced = minimalRepairPolicy(costs, () => 0.002)(life);
    expect(priced.costRate(null)).toBe(2);
    expect(priced.costRate(300)).toBeCloseTo((100 + 1000 / 9) / 300, 12);
    expect(priced.bestInterval()).toBe(bestMinimalRepairInterval(life, costs));
  });

  test('quantiles treat running to failure as beyond every interval', () => {
    expect(quantileOfSample([1, 2, 3, 4, 5], 0.5)).toBe(3);
    expect(quantileOfSample([1, 2, Infinity], 0.75)).toBe(Infinity);
    expect(quantileOfSample([1, 2, Infinity], 0.5)).toBe(2);
  });
});

describe('expected failures', () => {
  test('a schedule lowers the failures of a wearing class', () => {
    const ages = Array.from({ length: 100 }, (_, index) => index * 7);
    const life = { shape: 3, scale: 600 };
    const period = { ages, horizon: 365 };
    const without = expectedFailuresByAge({ ...period, plannedInterval: null }, life, [], 0.9).mean;
    const withOne = expectedFailuresByAge({ ...period, plannedInterval: 300 }, life, [], 0.9).mean;
    expect(withOne).toBeLessThan(without / 2);
  });

  test('a short period is the sum of the conditional chances', () => {
    const ages = [100, 400, 650];
    const life = { shape: 2.5, scale: 800 };
    const chance = (age: number) => 1 - Math.exp((age / 800) ** 2.5 - ((age + 5) / 800) ** 2.5);
    const forecast = expectedFailuresByAge({ ages, horizon: 5, plannedInterval: null }, life, [], 0.9);
    expect(forecast.mean).toBeCloseTo(
      ages.reduce((sum, age) => sum + chance(age), 0),
      6,
    );
  });

  test('stay finite and ordered for any life, ages and schedule', () => {
    const anyShape = fc.double({ min: 0.3, max: 15, noNaN: true });
    const planned = fc.option(fc.double({ min: 0.001, max: 5, noNaN: true }), { nil: null });
    fc.assert(
      fc.property(
        anyShape,
        fc.array(fc.double({ min: 0, max: 4, noNaN: true }), { maxLength: 50 }),
        fc.double({ min: 0.01, max: 100, noNaN: true }),
        planned,
        (beta, ages, horizon, plannedInterval) => {
          const life = { shape: beta, scale: 1 };
          const forecast = expectedFailuresByAge({ ages, horizon, plannedInterval }, life, [life], 0.9);
          expect(forecast.mean).toBeGreaterThanOrEqual(0);
          expect(Number.isFinite(forecast.mean)).toBe(true);
          expect(forecast.lower).toBeLessThanOrEqual(forecast.upper);
        },
      ),
      { numRuns: 40 },
    );
  });

  test('uncertainty of the fit widens the range', () => {
    const fit = { shape: 2, scale: 900, covariance: { lnShape: 0.09, lnScale: 0.04, cross: 0 } };
    const ages = Array.from({ length: 200 }, () => 450);
    const period = { ages, horizon: 365, plannedInterval: null };
    const sure = expectedFailuresByAge(period, fit, [fit], 0.9);
    const unsure = expectedFailuresByAge(period, fit, weibullDraws(fit), 0.9);
    expect(unsure.upper - unsure.lower).toBeGreaterThan(sure.upper - sure.lower);
    expect(unsure.mean).toBe(sure.mean);
  });

  test('no failure seen still leaves a range', () => {
    expect(expectedFailuresAtConstantRate(0, 1000, 3000, 0.9).upper).toBeGreaterThan(0);
    expect(() => expectedFailuresAtConstantRate(0, 0, 10, 0.9)).toThrow(RangeError);
  });
});

test('a mixture of one mean is Poisson, and its quantile inverts its distribution', () => {
  expect(new CountMixture([7.5]).quantile(0.95)).toBe(sparesNeeded(7.5, 0.95));
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 0, max: 5000, noNaN: true }), { minLength: 1, maxLength: 120 }),
      fc.double({ min: 0.001, max: 0.999, noNaN: true }),
      (means, p) => {
        const mixture = new CountMixture(means);
        const k = mixture.quantile(p);
        expect(mixture.cdf(k)).toBeGreaterThanOrEqual(p);
        if (k > 0) expect(mixture.cdf(k - 1)).toBeLessThan(p);
      },
    ),
    { numRuns: 50 },
  );
  expect(() => new CountMixture([])).toThrow(RangeError);
  expect(() => new CountMixture([NaN])).toThrow(RangeError);
});

test('spares refuse a demand or level outside their range', () => {
  expect(sparesNeeded(0, 0.95)).toBe(0);
  expect(() => sparesNeeded(-1, 0.95)).toThrow(RangeError);
  expect(() => sparesNeeded(1, 1)).toThrow(RangeError);
});

test('silence at a constant rate', () => {
  expect(silenceChance(0.01, 460.517)).toBeCloseTo(0.01, 6);
  expect(silenceChance(0.01, 0)).toBe(1);
});

describe('the scatter of counts where ages matter', () => {
  const period = { ages: Array.from({ length: 30 }, (_, i) => i * 30), horizon: 365, plannedInterval: null };

  test('is Poisson for a memoryless life, and has the moments of a simulation for others', () => {
    expect(new FailuresToCome(period).dispersion({ shape: 1, scale: 900 }, 96)).toBeCloseTo(1, 2);
    const random = seededRandom(5);
    for (const shape of [0.6, 2, 3]) {
      const counts = Array.from({ length: 4000 }, () =>
        period.ages.reduce((sum, age) => {
          let at = weibullLife(random, shape, 900, age) - age;
          let failures = 0;
          for (; at <= period.horizon; at += weibullLife(random, shape, 900)) failures += 1;
          return sum + failures;
        }, 0),
      );
      const mean = counts.reduce((sum, count) => sum + count, 0) / counts.length;
      const variance = counts.reduce((sum, count) => sum + (count - mean) ** 2, 0) / counts.length;
      const dispersion = new FailuresToCome(period).dispersion({ shape, scale: 900 }, 96);
      expect(dispersion / (variance / mean)).toBeGreaterThan(0.92);
      expect(dispersion / (variance / mean)).toBeLessThan(1.08);
    }
  });

  test('gives the binomial and the negative binomial where their numbers are whole', () => {
    // Binomial of 20 trials at 1/4, P(X ≤ 5) = 0.617173; R's pbinom(5, 20, .25).
    expect(new CountMixture([5], 0.75).cdf(5)).toBeCloseTo(0.6171727, 6);
    // Negative binomial, size 5, mean 5, P(X ≤ 5) = 0.6230469; R's pnbinom(5, 5, .5).
    expect(new CountMixture([5], 2).cdf(5)).toBeCloseTo(0.6230469, 6);
    expect(() => new CountMixture([5], 0)).toThrow(RangeError);
  });
});
