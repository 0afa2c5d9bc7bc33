import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { History } from '~/reliability/history';
import { fitPowerLaw, type PowerLawFit } from '~/reliability/power-law';
import { expectClose } from '../../support/relative';
import { seededRandom, weibullLife } from '../../support/seeded-random';

const failed = (age: number, entry = 0): History => ({ entry, exit: age, failures: [age] });
const survived = (age: number, entry = 0): History => ({ entry, exit: age, failures: [] });

function fitted(histories: readonly History[]): PowerLawFit {
  const fit = fitPowerLaw(histories);
  if (fit.kind !== 'fit') throw new Error(fit.reason.code);
  return fit;
}

const history = fc
  .record({
    entry: fc.oneof(fc.constant(0), fc.integer({ min: 1, max: 500 })),
    watched: fc.integer({ min: 1, max: 1000 }),
    shares: fc.array(fc.integer({ min: 1, max: 100 }), { maxLength: 3 }),
  })
  .map(({ entry, watched, shares }): History => {
    const failures = shares.map((share) => entry + (watched * share) / 100).sort((a, b) => a - b);
    return { entry, exit: entry + watched, failures };
  });
const histories = fc.array(history, { minLength: 1, maxLength: 12 });

describe('what cannot be estimated says why', () => {
  it.each([
    ['no failures', [survived(10), survived(20, 5)], 'no-failures'],
    ['nothing watched', [], 'no-failures'],
    ['one failure at the longest age', [failed(10), survived(8)], 'failures-only-at-the-end'],
    [
      'all failures tied at the longest age',
      [failed(10), failed(10), failed(10)],
      'failures-only-at-the-end',
    ],
    [
      'late entries with all failures at once',
      [failed(100.001, 100), survived(900, 100)],
      'slope-below-search',
    ],
    ['failures an instant before the end', [failed(10), survived(10.000001)], 'slope-above-search'],
  ])('%s', (_, given, code) => {
    expect(fitPowerLaw(given)).toMatchObject({ kind: 'cannot-be-estimated', reason: { code } });
  });
});

describe('power-law fit', () => {
  it('takes one failure among survivors, with a wide interval', () => {
    const fit = fitted([failed(5), survived(10), survived(10)]);
    expect(fit.failures).toBe(1);
    expect(fit.interval.low).toBeLessThan(fit.shape / 5);
    expect(fit.interval.high).toBeGreaterThan(2 * fit.shape);
  });

  it('leaves an end of the interval open where the likelihood does not bound it', () => {
    const fit = fitted([failed(150, 100), failed(350, 100), survived(400, 100)]);
    expect(fit.interval.low).toBeNull();
    expect(fit.interval.high).toBeGreaterThan(fit.shape);
  });

  it.each([1e-6, 1e9])('gives the same slope at a scale of %s', (unit) => {
    const random = seededRandom(3);
    const lives = Array.from({ length: 40 }, () => weibullLife(random, 1.7, 1));
    const base = fitted(lives.map((age) => failed(age)));
    const scaled = fitted(lives.map((age) => failed(age * unit)));
    expectClose(scaled.shape, base.shape, 1e-11);
    expectClose(scaled.scale, base.scale * unit, 1e-11);
    expectClose(scaled.logLikelihood + 40 * Math.log(unit), base.logLikelihood, 1e-11);
    expectClose(scaled.interval.low, base.interval.low ?? NaN, 1e-9);
    expectClose(scaled.interval.high, base.interval.high ?? NaN, 1e-9);
  });

  it('has the covariance of the observed information', () => {
    const random = seededRandom(4);
    const data = Array.from({ length: 60 }, (_, i) => {
      const entry = i % 3 === 0 ? 0.3 : 0;
      const age = weibullLife(random, 1.6, 1, entry);
      return age < 1.2 ? failed(age, entry) : survived(1.2, entry);
    });
    const fit = fitted(data);
    const logLikelihood = (b: number, e: number) => {
      const [shape, scale] = [Math.exp(b), Math.exp(e)];
      return data.reduce((sum, { entry, exit, failures }) => {
        const hazard = failures.map((t) => b - e + (shape - 1) * (Math.log(t) - e));
        return sum + hazard.reduce((s, h) => s + h, 0) - (exit / scale) ** shape + (entry / scale) ** shape;
      }, 0);
    };
    const [b, e, d] = [Math.log(fit.shape), Math.log(fit.scale), 1e-4];
    const f = (i: number, j: number) => logLikelihood(b + i * d, e + j * d);
    const bb = -(f(1, 0) - 2 * f(0, 0) + f(-1, 0)) / d ** 2;
    const ee = -(f(0, 1) - 2 * f(0, 0) + f(0, -1)) / d ** 2;
    const be = -(f(1, 1) - f(1, -1) - f(-1, 1) + f(-1, -1)) / (4 * d ** 2);
    const determinant = bb * ee - be * be;
    expectClose(f(0, 0), fit.logLikelihood, 1e-11);
    expectClose(fit.covariance.lnShape, ee / determinant, 1e-5);
    expectClose(fit.covariance.lnScale, bb / determinant, 1e-5);
    expectClose(fit.covariance.cross, -be / determinant, 1e-5);
  });

  it('takes 100,000 lives of distinct age in seconds of processor time', { timeout: 60_000 }, () => {
    const random = seededRandom(5);
    const lives = Array.from({ length: 100_000 }, (_, i) => {
      const age = weibullLife(random, 2, 900);
      return i % 100 === 0 ? failed(age) : survived(age * random());
    });
    const before = process.cpuUsage();
    expect(fitted(lives).failures).toBe(1000);
    expect(process.cpuUsage(before).user / 1e6).toBeLessThan(4);
  });

  it('does not mind the order of the records', () => {
    fc.assert(
      fc.property(histories, (given) => {
        expect(fitPowerLaw(given.toReversed())).toEqual(fitPowerLaw(given));
      }),
    );
  });

  it('is not moved by splitting a life between failures', () => {
    fc.assert(
      fc.property(histories, fc.double({ min: 0.01, max: 0.99, noNaN: true }), (given, share) => {
        const split = given.flatMap((whole): History[] => {
          const cut = whole.entry + share * (whole.exit - whole.entry);
          const before = whole.failures.filter((time) => time <= cut);
          const after = whole.failures.filter((time) => time > cut);
          return [
            { entry: whole.entry, exit: cut, failures: before },
            { entry: cut, exit: whole.exit, failures: after },
          ];
        });
        const [one, two] = [fitPowerLaw(given), fitPowerLaw(split)];
        expect(two.kind).toBe(one.kind);
        if (one.kind !== 'fit' || two.kind !== 'fit') return;
        expectClose(two.shape, one.shape, 1e-8);
        expectClose(two.scale, one.scale, 1e-8);
      }),
    );
  });

  it('never gives a number that is not one', () => {
    fc.assert(
      fc.property(histories, (given) => {
        const fit = fitPowerLaw(given);
        if (fit.kind !== 'fit') return;
        const { low, high } = fit.interval;
        const numbers = [fit.shape, fit.logLikelihood, fit.lnShapeStandardError, low ?? 0, high ?? 0];
        expect(numbers.filter((number) => !Number.isFinite(number))).toEqual([]);
        expect(low ?? 0).toBeLessThan(fit.shape);
        expect(high ?? Infinity).toBeGreaterThan(fit.shape);
      }),
    );
  });
});
