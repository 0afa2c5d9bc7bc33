import { describe, expect, it } from 'vitest';
import { fitExponential, meanTimeInterval, rateInterval } from '~/reliability/exponential';
import type { History } from '~/reliability/history';
import { likelihoodRatio } from '~/reliability/likelihood-ratio';
import { nelsonAalen } from '~/reliability/nelson-aalen';
import { piecewiseHazard } from '~/reliability/piecewise-hazard';
import { fitPowerLaw } from '~/reliability/power-law';
import { normalUpperTail, poissonCdf, poissonUpperTail } from '~/reliability/special-functions';
import {
  weibullB10,
  weibullCumulativeHazard,
  weibullHazard,
  weibullMeanLife,
  weibullRestrictedMean,
  weibullSurvival,
} from '~/reliability/weibull';
import { expectClose } from '../../support/relative';
import { seededRandom, weibullLife } from '../../support/seeded-random';

function lives(seed: number, shape: number, count = 200): History[] {
  const random = seededRandom(seed);
  return Array.from({ length: count }, (_, index) => {
    const entry = index % 4 === 0 ? 200 : 0;
    const age = weibullLife(random, shape, 900, entry);
    return age < 1000 ? { entry, exit: age, failures: [age] } : { entry, exit: 1000, failures: [] };
  });
}

describe('constant rate', () => {
  it('has no upper end for the mean time without a failure, and a rate from 0', () => {
    // exp(−high × exposure) = 5 %: the chance of silence at the upper end.
    expectClose(rateInterval(0, 10).high, -Math.log(0.05) / 10, 1e-12);
    expect(rateInterval(0, 10).low).toBe(0);
    expect(meanTimeInterval(0, 10).high).toBeNull();
    expect(fitExponential([{ entry: 0, exit: 10, failures: [] }])).toBeNull();
  });

  it('has ends at which the count seen has a chance of 5 % each way', () => {
    const { low, high } = rateInterval(7, 35);
    expectClose(poissonUpperTail(6, low * 35), 0.05, 1e-10);
    expectClose(poissonCdf(7, high * 35), 0.05, 1e-10);
  });
});

describe('likelihood ratio', () => {
  it.each([
    [2.5, 1],
    [0.5, -1],
  ])('signs its root by the side of the slope: β = %s', (shape, sign) => {
    const histories = lives(31, shape);
    const [fit, exponential] = [fitPowerLaw(histories), fitExponential(histories)];
    if (fit.kind !== 'fit' || exponential === null) throw new Error('no fit');
    const test = likelihoodRatio(fit, exponential);
    expect(Math.sign(test.signedRoot)).toBe(sign);
    expectClose(test.signedRoot ** 2, test.statistic, 1e-12);
    // The tail on the side of the slope is half the two-sided p.
    expectClose(2 * normalUpperTail(Math.abs(test.signedRoot)), test.pTwoSided, 1e-9);
    expect(test.pWearOut).toBe(normalUpperTail(test.signedRoot));
  });
});

describe('hazard by age', () => {
  it('adds failures over those under watch, late entries not before their time', () => {
    const steps = nelsonAalen([
      { entry: 0, exit: 10, failures: [4, 10] },
      { entry: 5, exit: 12, failures: [] },
      { entry: 0, exit: 4, failures: [4] },
    ]);
    expect(steps.map(({ age, failures, atRisk }) => [age, failures, atRisk])).toEqual([
      [4, 2, 2],
      [10, 1, 2],
    ]);
    expect(steps.at(-1)?.cumulativeHazard).toBe(1.5);
    expect(steps.at(-1)?.standardError).toBe(Math.sqrt(0.75));
    expect(nelsonAalen([])).toEqual([]);
  });

  it('follows the true cumulative hazard', () => {
    const last = nelsonAalen(lives(32, 2, 3000)).at(-1);
    const truth = weibullCumulativeHazard({ shape: 2, scale: 900 }, last?.age ?? NaN);
    expect(Math.abs((last?.cumulativeHazard ?? NaN) - truth)).toBeLessThan(4 * (last?.standardError ?? NaN));
  });

  it('cuts bands of at least five failures that hold all failures and all exposure', () => {
    const histories = lives(33, 2);
    const { bands, longestAge } = piecewiseHazard(histories);
    expect(longestAge).toBe(1000);
    expect(bands.length).toBeGreaterThan(4);
    expect(Math.min(...bands.map(({ failures }) => failures))).toBeGreaterThanOrEqual(5);
    const sum = (pick: (band: (typeof bands)[number]) => number) =>
      bands.reduce((s, band) => s + pick(band), 0);
    expect(sum(({ failures }) => failures)).toBe(histories.flatMap((h) => h.failures).length);
    expectClose(
      sum(({ exposure }) => exposure),
      histories.reduce((s, h) => s + h.exit - h.entry, 0),
      1e-12,
    );
    for (const band of bands) expect(band.low < band.rate && band.rate < band.high).toBe(true);
  });

  it('draws no band from fewer than five failures and one where all are tied', () => {
    const tied = (count: number) => [{ entry: 0, exit: 10, failures: Array<number>(count).fill(6) }];
    expect(piecewiseHazard(tied(4))).toEqual({ bands: [], longestAge: 10 });
    expect(piecewiseHazard(tied(12)).bands).toMatchObject([{ from: 0, to: 10, failures: 12, exposure: 10 }]);
    expect(piecewiseHazard([])).toEqual({ bands: [], longestAge: 0 });
  });
});

describe('Weibull life', () => {
  it('is exponential at a slope of 1', () => {
    const life = { shape: 1, scale: 50 };
    expectClose(weibullMeanLife(life), 50, 1e-12);
    expectClose(weibullB10(life), -50 * Math.log(0.9), 1e-12);
    expectClose(weibullHazard(life, 123), 0.02, 1e-12);
    expectClose(weibullSurvival(life, 50), Math.exp(-1), 1e-12);
    expectClose(weibullRestrictedMean(life, 50), 50 * (1 - Math.exp(-1)), 1e-12);
  });

  it.each([
    [0.3, 10],
    [2, 500],
    [2, 5000],
    [30, 950],
  ])('cuts the mean off as the integral of survival does: β = %s at %s', (shape, cutOff) => {
    const life = { shape, scale: 900 };
    // Midpoint rule after t = u⁴, which takes the edge off at age 0.
    const n = 20_000;
    let integral = 0;
    for (let i = 0; i < n; i += 1) {
      const u = (i + 0.5) / n;
      integral += (weibullSurvival(life, cutOff * u ** 4) * 4 * cutOff * u ** 3) / n;
    }
    expectClose(weibullRestrictedMean(life, cutOff), integral, 1e-6);
  });

  it('cuts the mean off where the whole mean is too long for any number', () => {
    const life = { shape: 1e-3, scale: 1 };
    expect(weibullMeanLife(life)).toBe(Infinity);
    expectClose(weibullRestrictedMean(life, 1), Math.exp(-1), 2e-3);
    expect(weibullRestrictedMean(life, 0)).toBe(0);
  });
});
