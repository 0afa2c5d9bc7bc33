import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { binomialAtLeast, binomialAtMost, binomialProbability } from '~/reliability/binomial-tail';
import { cramerVonMises } from '~/reliability/cramer-von-mises';
import { dispersion } from '~/reliability/dispersion';
import type { History } from '~/reliability/history';
import { meanCumulativeFunction } from '~/reliability/mean-cumulative-function';
import { fitPowerLaw } from '~/reliability/power-law';
import { sameCauseClusters } from '~/reliability/same-cause';
import { compareTwoRates } from '~/reliability/two-rates';
import { visitRate } from '~/reliability/visit-rate';
import { weibullFitCheck } from '~/reliability/weibull-fit-check';
import { seededRandom } from '../../support/seeded-random';

const histories: fc.Arbitrary<History[]> = fc.array(
  fc
    .tuple(
      fc.nat(300),
      fc.integer({ min: 1, max: 900 }),
      fc.array(fc.double({ min: 0, max: 0.999 }), { maxLength: 5 }),
    )
    .map(([entry, length, shares]) => ({
      entry,
      exit: entry + length,
      failures: shares
        .filter((share) => !Number.isNaN(share))
        .map((share) => entry + length - Math.floor(share * length))
        .sort((a, b) => a - b),
    })),
  { minLength: 1, maxLength: 25 },
);

describe('mean cumulative function', () => {
  test('agrees with mean and variance summed out history by history', () => {
    fc.assert(
      fc.property(histories, (all) => {
        const points = meanCumulativeFunction(all, 0.9);
        const atRisk = (time: number) => all.filter(({ entry, exit }) => entry < time && time <= exit);
        for (const point of points) {
          const before = points.filter(({ time }) => time <= point.time);
          const mean = before.reduce((sum, { failures, time }) => sum + failures / atRisk(time).length, 0);
          let variance = 0;
          for (const { entry, exit, failures } of all) {
            let own = 0;
            for (const { time, failures: count } of before) {
              if (!(entry < time && time <= exit)) continue;
              const m = atRisk(time).length;
              own += (failures.filter((failure) => failure === time).length - count / m) / m;
            }
            variance += own * own;
          }
          expect(point.mean).toBeCloseTo(mean, 9);
          expect(point.standardError ** 2).toBeCloseTo(variance, 9);
          expect(point.lower).toBeLessThanOrEqual(point.mean);
        }
      }),
      { numRuns: 60 },
    );
  });

  test('does not depend on the order of records or on positions never under watch at a failure', () => {
    fc.assert(
      fc.property(histories, (all) => {
        const points = meanCumulativeFunction(all, 0.9);
        const late = { entry: 5000, exit: 6000, failures: [] };
        const other = meanCumulativeFunction([late, ...all.toReversed()], 0.9);
        expect(other.map(({ time, failures, watched }) => [time, failures, watched])).toEqual(
          points.map(({ time, failures, watched }) => [time, failures, watched]),
        );
        other.forEach((point, index) => {
          expect(point.standardError).toBeCloseTo(points[index]?.standardError ?? NaN, 9);
        });
      }),
    );
  });

  test('is empty without failures', () => {
    expect(meanCumulativeFunction([{ entry: 0, exit: 9, failures: [] }], 0.9)).toEqual([]);
  });
});

describe('Cramér–von Mises', () => {
  test('rejects at 5 % about one time in twenty when the power law holds', () => {
    const random = seededRandom(20);
    for (const count of [2, 5, 12, 40]) {
      const runs = 3000;
      let rejected = 0;
      for (let run = 0; run < runs; run += 1) {
        const failures = Array.from({ length: count }, () => random()).sort((a, b) => a - b);
        const slope = count / failures.reduce((sum, time) => sum - Math.log(time), 0);
        if (cramerVonMises([{ entry: 0, exit: 1, failures }], slope)?.rejected) rejected += 1;
      }
      expect(rejected / runs).toBeGreaterThan(0.035);
      expect(rejected / runs).toBeLessThan(0.065);
    }
  });

  test('sees a window in which all failures crowd at two places', () => {
    const failures = [
      ...Array.from({ length: 10 }, (_, i) => 100 + i),
      ...Array.from({ length: 10 }, (_, i) => 900 + i),
    ];
    expect(cramerVonMises([{ entry: 0, exit: 1000, failures }], 1)?.rejected).toBe(true);
  });

  test('late windows keep their digits and the unit does not matter', () => {
    const window = { entry: 1e6, exit: 1e6 + 10, failures: [1e6 + 2, 1e6 + 5, 1e6 + 8] };
    const check = cramerVonMises([window], 1.5);
    expect(check?.statistic).toBeCloseTo(1 / 36 + (0.2 - 1 / 6) ** 2 + (0.8 - 5 / 6) ** 2, 5);
    const scaled = { entry: 1e15, exit: 1e15 + 1e10, failures: window.failures.map((time) => time * 1e9) };
    expect(cramerVonMises([scaled], 1.5)?.statistic).toBeCloseTo(check?.statistic ?? NaN, 8);
    expect(cramerVonMises([{ entry: 0, exit: 9, failures: [4] }], 1)).toBeNull();
  });
});

describe('Weibull fit check', () => {
  const random = seededRandom(7);
  const watched = (life: () => number): History[] =>
    Array.from({ length: 80 }, () => {
      const entry = random() < 0.3 ? 200 * random() : 0;
      let age = life();
      while (age <= entry) age = life();
      const exit = entry + 200 + 900 * random();
      return age < exit ? { entry, exit: age, failures: [age] } : { entry, exit, failures: [] };
    });
  const pOf = (lives: History[]): number => {
    const fit = fitPowerLaw(lives);
    if (fit.kind !== 'fit') throw new Error('no fit');
    return weibullFitCheck(lives, fit.shape)?.p ?? NaN;
  };
  const weibull = () => 600 * (-Math.log(random())) ** (1 / 1.8);
  const infantAndOld = () => (random() < 0.4 ? -60 * Math.log(random()) : 700 + 100 * random());

  test('rejects about one true Weibull in twenty, and a mixture of early and late deaths', () => {
    const runs = 400;
    const rejected = Array.from({ length: runs }, () => pOf(watched(weibull))).filter((p) => p < 0.05).length;
    expect(rejected / runs).toBeGreaterThan(0.02);
    expect(rejected / runs).toBeLessThan(0.085);
    expect(pOf(watched(infantAndOld))).toBeLessThan(0.001);
  });

  test('does not depend on the unit or the order, and needs two bands of five', () => {
    const lives = watched(weibull);
    const times = (factor: number) =>
      lives.map(({ entry, exit, failures }) => ({
        entry: entry * factor,
        exit: exit * factor,
        failures: failures.map((time) => time * factor),
      }));
    expect(pOf(times(1e-6))).toBeCloseTo(pOf(lives), 4);
    expect(pOf(times(1e9).reverse())).toBeCloseTo(pOf(lives), 4);
    expect(weibullFitCheck(lives.slice(0, 6), 1)).toBeNull();
    expect(
      weibullFitCheck(
        Array.from({ length: 20 }, () => ({ entry: 0, exit: 9, failures: [5] })),
        1,
      ),
    ).toBeNull();
  });
});

describe('binomial tails', () => {
  test('add up', () => {
    fc.assert(
      fc.property(
        fc.nat(400),
        fc.nat(400),
        fc.double({ min: 1e-6, max: 1 - 1e-6, noNaN: true }),
        (n, at, p) => {
          const k = at % (n + 1);
          expect(binomialAtLeast(k, n, p) + binomialAtMost(k - 1, n, p)).toBeCloseTo(1, 9);
          expect(binomialAtMost(k, n, p) - binomialAtMost(k - 1, n, p)).toBeCloseTo(
            binomialProbability(k, n, p),
            9,
          );
        },
      ),
    );
  });

  test('know their edges', () => {
    expect([binomialAtLeast(0, 5, 0.2), binomialAtLeast(6, 5, 0.2), binomialAtMost(5, 5, 0.2)]).toEqual([
      1, 0, 1,
    ]);
    expect([binomialAtLeast(1, 5, 0), binomialAtLeast(5, 5, 1)]).toEqual([0, 1]);
  });
});

test('two rates: swapping the sides turns the ratio and its interval over', () => {
  const side = fc.record({ failures: fc.nat(300), exposure: fc.double({ min: 1, max: 1e6, noNaN: true }) });
  fc.assert(
    fc.property(side, side, (first, second) => {
      const forth = compareTwoRates(first, second, 0.9);
      const back = compareTwoRates(second, first, 0.9);
      expect(back.p).toBeCloseTo(forth.p, 6);
      if (forth.upper !== null) expect(back.lower * forth.upper).toBeCloseTo(forth.upper === 0 ? 0 : 1, 5);
      expect(forth.p).toBeGreaterThanOrEqual(0);
      expect(forth.p).toBeLessThanOrEqual(1);
    }),
  );
  expect(compareTwoRates({ failures: 0, exposure: 1 }, { failures: 0, exposure: 1 }, 0.9)).toMatchObject({
    ratio: null,
    p: 1,
  });
  expect(() => compareTwoRates({ failures: 1.5, exposure: 1 }, { failures: 0, exposure: 1 }, 0.9)).toThrow(
    RangeError,
  );
  expect(() => compareTwoRates({ failures: 1, exposure: 0 }, { failures: 0, exposure: 1 }, 0.9)).toThrow(
    RangeError,
  );
});

describe('dispersion', () => {
  const rejects = (rates: readonly number[], seed: number): number => {
    const random = seededRandom(seed);
    const total = rates.reduce((sum, rate) => sum + rate, 0);
    const runs = 1000;
    let rejected = 0;
    for (let run = 0; run < runs; run += 1) {
      const counts = rates.map((rate) => ({ failures: 0, exposure: rate }));
      for (let failure = 0; failure < 38; failure += 1) {
        let left = random() * total;
        const hit = counts.find((count) => (left -= count.exposure) < 0) ?? counts[0];
        if (hit) hit.failures += 1;
      }
      if ((dispersion(counts, 0.05)?.p ?? 1) < 0.05) rejected += 1;
    }
    return rejected / runs;
  };

  test('keeps its size with few failures, even and uneven exposure', () => {
    for (const rates of [
      Array.from({ length: 40 }, () => 1),
      Array.from({ length: 40 }, (_, i) => 1.1 ** i),
    ]) {
      const size = rejects(rates, 3);
      expect(size).toBeGreaterThan(0.025);
      expect(size).toBeLessThan(0.08);
    }
  });

  test('leaves out positions never watched, and says nothing about one', () => {
    const two = [
      { failures: 4, exposure: 10 },
      { failures: 1, exposure: 30 },
    ];
    const padded = [{ failures: 0, exposure: 0 }, ...two];
    expect(dispersion(padded, 0.05)?.p).toBe(dispersion(two, 0.05)?.p);
    expect(dispersion(two.slice(1), 0.05)).toBeNull();
    expect(
      dispersion(
        [
          { failures: 0, exposure: 4 },
          { failures: 0, exposure: 4 },
        ],
        0.05,
      ),
    ).toBeNull();
    expect(
      dispersion(
        [
          { failures: 1, exposure: 4 },
          { failures: 0, exposure: 4 },
        ],
        0.05,
      )?.p,
    ).toBe(1);
    expect(() => dispersion([{ failures: 1, exposure: 0 }], 0.05)).toThrow(RangeError);
  });
});

describe('same cause', () => {
  const day = (key: string, failures: number) => ({ key, failures, exposureShare: 1 / 1000 });

  test('finds the one day that stands out, bounded over all days scanned', () => {
    const cells = [...Array.from({ length: 26 }, (_, index) => day(`d${index}`, 1)), day('storm', 4)];
    const clusters = sameCauseClusters(cells, 1000, 3, 0.01);
    expect(clusters.map(({ key }) => key)).toEqual(['storm']);
    expect(clusters[0]?.p).toBeCloseTo(1000 * binomialAtLeast(4, 30, 1e-3), 15);
    expect(clusters[0]?.expected).toBeCloseTo(0.03, 12);
  });

  test('three on one day of a busy class are nothing', () => {
    const cells = Array.from({ length: 400 }, (_, index) => day(`d${index}`, index % 40 === 0 ? 3 : 1));
    expect(sameCauseClusters(cells, 1000, 3, 0.01)).toEqual([]);
    expect(() => sameCauseClusters(cells, 10, 3, 0.01)).toThrow(RangeError);
  });
});

describe('rate after visits', () => {
  test('counts spans once where visits lie close, and not the visit itself', () => {
    const position = {
      from: 0,
      to: 1000,
      visits: [120, 100, 990],
      failures: [100, 101, 150, 151, 995, 1001],
    };
    const rate = visitRate([position], 30, 0.9);
    expect(rate.after).toEqual({ failures: 3, exposure: 60 });
    expect(rate.otherwise).toEqual({ failures: 2, exposure: 940 });
    expect(rate.comparison?.lower).toBeGreaterThan(1);
  });

  test('has nothing to compare without visits', () => {
    const rate = visitRate([{ from: 0, to: 100, visits: [], failures: [4] }], 30, 0.9);
    expect(rate.comparison).toBeNull();
    expect(rate.otherwise).toEqual({ failures: 1, exposure: 100 });
  });
});
