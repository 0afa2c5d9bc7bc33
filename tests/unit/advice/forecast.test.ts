import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { comparePeriods, countPeriod } from '~/advice/compare-periods';
import { forecast, type ForecastInput } from '~/advice/forecast';
import { forecastFindingsSchema, type ForecastFindings } from '~/advice/forecast-findings';
import { itemsInPlace } from '~/advice/items-in-place';
import { expectedFailuresAtConstantRate, expectedFailuresByAge } from '~/reliability/expected-failures';
import { meanTimeInterval } from '~/reliability/exponential';
import { lifeHistories } from '~/reliability/life-histories';
import { fitPowerLaw } from '~/reliability/power-law';
import { weibullDraws } from '~/reliability/quasi-random-draws';
import { dutyUsage } from '~/reliability/usage';
import { aPosition, anEvent } from '../../support/position';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const month = 30.4375;
type Forecast = Extract<ForecastFindings, { kind: 'forecast' }>;

function inputFor(shape: number, differences: Partial<ForecastInput> = {}): ForecastInput {
  const positions = simulateClass(seededRandom(7), { ...usualClass, shape });
  const now = positions.reduce((latest, { watchTo }) => Math.max(latest, watchTo), 0);
  return {
    positions,
    siteOf: () => ({ siteId: 'one', siteName: 'Orrin Library' }),
    now,
    overall: countPeriod(positions, -Infinity, Infinity),
    lastYear: countPeriod(positions, now - 365, now + 1),
    fit: fitPowerLaw(lifeHistories(positions).histories),
    currentInterval: null,
    leadTimeDays: 45,
    serviceLevel: 0.95,
    ...differences,
  };
}

function forecastOf(input: ForecastInput): Forecast {
  const findings = forecastFindingsSchema.parse(JSON.parse(JSON.stringify(forecast(input))));
  if (findings.kind !== 'forecast') throw new Error('there is something to go by');
  return findings;
}

describe('failures to come, site by site', () => {
  const halves = (positionId: string) =>
    Number(positionId.split('-')[1]) % 2 === 0
      ? { siteId: 'b', siteName: 'Tarn House' }
      : { siteId: 'a', siteName: 'Orrin Library' };

  it.each([1, 3])('are those of the class where there is one site, at shape %d', (shape) => {
    const { sites, periods, spares, positions } = forecastOf(inputFor(shape));
    expect(sites).toHaveLength(1);
    expect(sites[0]).toMatchObject({ siteName: 'Orrin Library', positions, spares: spares?.spares });
    for (const [index, { mean, low, high }] of sites[0]!.periods.entries()) {
      expect(mean).toBeCloseTo(periods[index]!.mean, 9);
      expect({ low, high }).toEqual({ low: periods[index]!.low, high: periods[index]!.high });
    }
  });

  it.each([1, 3])('add up to the class in the mean, in order of name, at shape %d', (shape) => {
    const { sites, periods } = forecastOf(inputFor(shape, { siteOf: halves }));
    expect(sites.map(({ siteName }) => siteName)).toEqual(['Orrin Library', 'Tarn House']);
    for (const [index, { mean, high }] of periods.entries()) {
      const parts = sites.map((site) => site.periods[index]!);
      // Groups of ages are formed within each site, which moves the sum by a little.
      expect(parts.reduce((sum, part) => sum + part.mean, 0) / mean).toBeCloseTo(1, 2);
      for (const part of parts) expect(part.high).toBeLessThan(high);
    }
  });

  it('expect more where the old ones are', () => {
    const positions = simulateClass(seededRandom(7), { ...usualClass, shape: 4 });
    const now = Math.max(...positions.map(({ watchTo }) => watchTo));
    const ages = new Map(
      positions.map((position) => [position.id, itemsInPlace([position], now).ages[0] ?? 0]),
    );
    const middle = [...ages.values()].sort((a, b) => a - b)[Math.floor(ages.size / 2)]!;
    const { sites } = forecastOf(
      inputFor(4, {
        siteOf: (id) =>
          (ages.get(id) ?? 0) > middle
            ? { siteId: 'o', siteName: 'Old' }
            : { siteId: 'y', siteName: 'Young' },
      }),
    );
    const [old, young] = sites;
    expect(old!.periods[0]!.mean / old!.positions).toBeGreaterThan(
      3 * (young!.periods[0]!.mean / young!.positions),
    );
  });
});

describe('failures to come', () => {
  it('come at the constant rate, with its exact mean and range', () => {
    const input = inputFor(1);
    const findings = forecastOf(input);
    expect(findings).toMatchObject({ basis: 'rate', confidence: 0.9, agesUnknown: 0 });
    for (const { months, mean, low, high } of findings.periods) {
      const exposure = findings.positions * months * month;
      const { failures, exposure: seen } = input.overall;
      const expected = expectedFailuresAtConstantRate(failures, seen, exposure, 0.9);
      expect(mean).toBeCloseTo(expected.mean, 9);
      expect([low, high]).toEqual([expected.lower, expected.upper]);
    }
    const { failures, exposure } = input.overall;
    expect(findings.meanTime).toMatchObject({
      value: exposure / failures,
      ...meanTimeInterval(failures, exposure),
    });
  });

  it('come by the ages in place where items wear out, as near as 400 draws and a fine grid would say', () => {
    const input = inputFor(3);
    const findings = forecastOf(input);
    expect(findings.basis).toBe('ages');
    if (input.fit.kind !== 'fit') throw new Error('the class has a fit');
    const { ages } = itemsInPlace(input.positions, input.now);
    for (const { months, mean, low, high } of findings.periods) {
      const period = { ages, horizon: months * month, plannedInterval: null };
      const expected = expectedFailuresByAge(period, input.fit, weibullDraws(input.fit), 0.9);
      expect(mean / expected.mean).toBeCloseTo(1, 1.7);
      expect(Math.abs(low - expected.lower)).toBeLessThanOrEqual(1);
      expect(Math.abs(high - expected.upper)).toBeLessThanOrEqual(1);
    }
    const scheduled = forecastOf({ ...input, currentInterval: 300 });
    expect(scheduled.periods[2]?.mean).toBeLessThan(findings.periods[2]?.mean ?? 0);
  });

  it('go by the last year where its rate has clearly changed', () => {
    const changed = inputFor(1, {
      overall: { failures: 40, exposure: 40_000 },
      lastYear: { failures: 28, exposure: 12_000 },
    });
    const findings = forecastOf(changed);
    expect(findings.basis).toBe('last-year-rate');
    expect(findings.meanTime).toMatchObject({ failures: 28, exposure: 12_000 });
  });

  it('have a range without any failure, and none without any item', () => {
    const none = { failures: 0, exposure: 20_000 };
    const quiet = forecastOf(inputFor(1, { overall: none, lastYear: none }));
    expect(quiet.periods[2]).toMatchObject({ mean: 0, low: 0 });
    expect(quiet.periods[2]?.high).toBeGreaterThan(0);
    expect(quiet.meanTime).toMatchObject({ value: null, high: null });
    expect(forecast(inputFor(1, { positions: [] }))).toEqual({ kind: 'nothing-to-go-by' });
    const retired = inputFor(1);
    expect(forecast({ ...retired, now: retired.now + 400 })).toEqual({ kind: 'nothing-to-go-by' });
  });

  it('say how many spares a lead time needs', () => {
    const findings = forecastOf(inputFor(1));
    const { spares } = findings;
    expect(spares?.spares).toBeGreaterThanOrEqual(Math.floor(spares?.meanDemand ?? NaN));
    const sure = forecastOf(inputFor(1, { serviceLevel: 0.999 })).spares;
    expect(sure?.spares).toBeGreaterThan(spares?.spares ?? NaN);
    expect(forecastOf(inputFor(1, { leadTimeDays: null })).spares).toBeNull();
  });
});

describe('items in place', () => {
  it('have the age since they were fitted, on their own clocks', () => {
    const duty = { usage: dutyUsage(10), inServiceAt: 0, watchFrom: 0, watchTo: 1000 };
    const renewed = { ...duty, events: [anEvent(900)] };
    const justNow = { ...duty, events: [anEvent(1000, 'planned-renewal')] };
    const unknown = { ...duty, watchFrom: 500, fittedAt: null };
    const retired = { ...duty, watchTo: 700 };
    const positions = [duty, renewed, justNow, unknown, retired].map((one) => aPosition(one));
    const inPlace = itemsInPlace(positions, 1000);
    expect(inPlace.ages).toEqual([10_000, 1000, 0]);
    expect(inPlace.agesUnknown).toBe(1);
    expect(inPlace.positions).toHaveLength(4);
  });
});

describe('before and after a change', () => {
  it('is an exact test of two rates', () => {
    // R: poisson.test(c(4, 15), c(900, 1200), conf.level = 0.9)
    const comparison = comparePeriods({ failures: 15, exposure: 1200 }, { failures: 4, exposure: 900 });
    expect(comparison?.ratio).toBeCloseTo(0.355556, 6);
    expect(comparison?.p).toBeCloseTo(0.0641757, 7);
    expect(comparison?.low).toBeCloseTo(0.108566, 6);
    expect(comparison?.high).toBeCloseTo(0.962036, 6);
    expect(comparison?.change).toBe('fewer');
    expect(comparison?.sentence).toBe(
      'The class fails less often than before. 4 failures after the change, 15 failures before it: 0.36 times the rate, 90\u202f% interval 0.11 to 0.96, p = 0.064.',
    );
  });

  it('says when the periods cannot be told apart or compared', () => {
    expect(comparePeriods({ failures: 3, exposure: 100 }, { failures: 2, exposure: 100 })?.change).toBe(
      'unclear',
    );
    expect(comparePeriods({ failures: 0, exposure: 1000 }, { failures: 9, exposure: 1000 })).toMatchObject({
      change: 'more',
      ratio: null,
      high: null,
    });
    expect(comparePeriods({ failures: 0, exposure: 0 }, { failures: 9, exposure: 1000 })).toBeNull();
  });

  it('counts what happened within a period, on the clocks of the positions', () => {
    const position = aPosition({
      inServiceAt: 0,
      watchFrom: 100,
      watchTo: 1000,
      usage: dutyUsage(2),
      events: [150, 400, 600].map((at) => anEvent(at, 'failure-patched')),
    });
    expect(countPeriod([position], 0, 400)).toEqual({ failures: 1, exposure: 600 });
    expect(countPeriod([position], 400, 2000)).toEqual({ failures: 2, exposure: 1200 });
  });
});

it('tells finite numbers in order for any simulated class', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 1e6 }),
      fc.double({ min: 0.5, max: 6, noNaN: true }),
      fc.integer({ min: 1, max: 30 }),
      fc.option(fc.integer({ min: 1, max: 2000 }), { nil: null }),
      (seed, shape, count, currentInterval) => {
        const positions = simulateClass(seededRandom(seed), { ...usualClass, shape, positions: count });
        const now = positions.reduce((latest, { watchTo }) => Math.max(latest, watchTo), 0);
        const findings = forecastOf({
          ...inputFor(1),
          positions,
          now,
          overall: countPeriod(positions, -Infinity, Infinity),
          lastYear: countPeriod(positions, now - 365, now + 1),
          fit: fitPowerLaw(lifeHistories(positions).histories),
          currentInterval,
        });
        for (const { mean, low, high } of findings.periods) {
          expect(low).toBeLessThanOrEqual(high);
          expect(mean).toBeLessThanOrEqual(Math.max(3, 10 * high));
        }
      },
    ),
    { numRuns: 40 },
  );
});
