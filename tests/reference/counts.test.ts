import { describe, expect, test } from 'vitest';
import { binomialAtLeast } from '~/reliability/binomial-tail';
import { dispersion } from '~/reliability/dispersion';
import { expectedFailuresAtConstantRate, expectedFailuresByAge } from '~/reliability/expected-failures';
import { silenceChanceByAge } from '~/reliability/silence';
import { sparesNeeded } from '~/reliability/spares';
import { compareTwoRates } from '~/reliability/two-rates';

describe('two Poisson rates', () => {
  // Source: R 4.2 poisson.test(c(a, b), c(S, T), conf.level = .9).
  test.each([
    [4, 900, 15, 1200, 0.355556, 0.0641757, 0.108566, 0.962036],
    [11, 800, 21, 3011, 1.9714880952, 0.0796686330333, 0.977584347497, 3.82738640785],
    [30, 1000, 10, 1000, 3, 0.00222143377323, 1.58357717073, 6.02395745457],
    [250, 1e4, 200, 1e4, 1.25, 0.0207918002476, 1.06494754522, 1.46815786782],
  ])('%i in %f against %i in %f', (a, s, b, t, ratio, p, lower, upper) => {
    const result = compareTwoRates({ failures: a, exposure: s }, { failures: b, exposure: t }, 0.9);
    expect(result.ratio).toBeCloseTo(ratio, 6);
    expect(result.p).toBeCloseTo(p, 7);
    expect(result.lower).toBeCloseTo(lower, 6);
    expect(result.upper).toBeCloseTo(upper, 5);
  });

  test('none on one side', () => {
    // Source: R 4.2 poisson.test(c(0, 5), c(100, 100)) and poisson.test(c(5, 0), c(100, 300)), conf.level = .9.
    const first = compareTwoRates({ failures: 0, exposure: 100 }, { failures: 5, exposure: 100 }, 0.9);
    expect(first).toMatchObject({ ratio: 0, lower: 0 });
    expect(first.p).toBeCloseTo(0.0625, 10);
    expect(first.upper).toBeCloseTo(0.820564203026, 8);
    const second = compareTwoRates({ failures: 5, exposure: 100 }, { failures: 0, exposure: 300 }, 0.9);
    expect(second).toMatchObject({ ratio: null, upper: null });
    expect(second.p).toBeCloseTo(0.0009765625, 12);
    expect(second.lower).toBeCloseTo(3.65602105105, 7);
  });
});

test('spares at 95 % service', () => {
  // Source: R qpois(.95, mean).
  expect([0.5, 2, 7.5].map((mean) => sparesNeeded(mean, 0.95))).toEqual([2, 5, 12]);
});

test('binomial tails', () => {
  // Source: R pbinom(k - 1, n, p, lower = FALSE).
  expect(binomialAtLeast(10, 24, 0.1)).toBeCloseTo(5.20615531883e-5, 15);
  expect(binomialAtLeast(3, 30, 1e-3) * 1000).toBeCloseTo(0.00397863412866, 12);
  expect(binomialAtLeast(5, 500, 1e-3) * 1000).toBeCloseTo(0.169363680776, 10);
});

test('dispersion of ten positions with equal exposure, one of them bad', () => {
  // Source: R chisq.test(x)$statistic; pbinom for the worst; p by pchisq with the moments of Haldane 1937
  // (200,000 multinomial draws gave 0.00034 where the moments give 0.000115).
  const counts = [3, 1, 0, 4, 2, 10, 1, 0, 2, 1].map((failures) => ({ failures, exposure: 700 }));
  const result = dispersion(counts, 0.05);
  expect(result?.statistic).toBeCloseTo(32.6666666667, 8);
  expect(result?.degreesOfFreedom).toBe(9);
  expect(result?.p).toBeCloseTo(0.000115441857046, 12);
  expect(result?.stickingOut).toHaveLength(1);
  expect(result?.stickingOut[0]).toMatchObject({ index: 5, failures: 10 });
  expect(result?.stickingOut[0]?.p).toBeCloseTo(5.20615531883e-5, 15);
});

test('dispersion with unequal exposure', () => {
  // Source: R, as above; 200,000 multinomial draws gave p = 0.024 where the moments give 0.0101.
  const exposures = [100, 300, 200, 50, 80, 400, 120, 30, 900, 700, 10, 500];
  const failures = [3, 1, 0, 1, 0, 2, 1, 0, 1, 0, 0, 0];
  const result = dispersion(
    exposures.map((exposure, index) => ({ exposure, failures: failures[index] ?? 0 })),
    0.05,
  );
  expect(result?.statistic).toBeCloseTo(41.012962963, 8);
  expect(result?.p).toBeCloseTo(0.0101457530069, 10);
});

test('silence of an ageing item by hand', () => {
  // Source: R exp(-((900/600)^2 - (700/600)^2)).
  expect(silenceChanceByAge({ shape: 2, scale: 600 }, [{ from: 700, to: 900 }])).toBeCloseTo(
    0.411112290507,
    11,
  );
});

describe('expected failures', () => {
  test('constant rate: range of the negative binomial that gamma and Poisson make', () => {
    // Source: R qnbinom(c(.05, .95), 10.5, 1000/1500).
    const forecast = expectedFailuresAtConstantRate(10, 1000, 500, 0.9);
    expect(forecast).toMatchObject({ mean: 5, lower: 1, upper: 10 });
  });

  test('a new item on a wearing life has M(t) failures to come', () => {
    // Source: numerical renewal equation, M(2) = 1.8940 for shape 2, scale 1.
    const period = { ages: [0], horizon: 2, plannedInterval: null };
    expect(expectedFailuresByAge(period, { shape: 2, scale: 1 }, [], 0.9).mean).toBeCloseTo(1.894, 4);
  });

  test('memoryless items fail at their rate, whatever their age and schedule', () => {
    const draws = Array.from({ length: 5 }, () => ({ shape: 1, scale: 400 }));
    for (const plannedInterval of [null, 250, 90]) {
      const period = { ages: [0, 10, 80, 300], horizon: 200, plannedInterval };
      const forecast = expectedFailuresByAge(period, { shape: 1, scale: 400 }, draws, 0.9);
      expect(forecast.mean).toBeCloseTo(2, 3);
      // Source: R qpois(c(.05, .95), 2).
      expect(forecast).toMatchObject({ lower: 0, upper: 5 });
    }
  });
});
