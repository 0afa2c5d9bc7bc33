import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hazardAtWatchedAges, summariseLives } from '~/advice/life-summary';
import {
  ageWords,
  changeWords,
  everyWords,
  intervalWords,
  practicableInterval,
} from '~/advice/practicable-interval';
import { priceSchedule, tryInterval, type ScheduleInput } from '~/advice/price-schedule';
import { scheduleFindingsSchema, type PricedSchedule } from '~/advice/schedule-findings';
import { ageReplacementCostRate, bestAgeReplacement } from '~/reliability/age-replacement';
import { blockReplacementCostRate } from '~/reliability/block-replacement';
import { failureFindingInterval } from '~/reliability/failure-finding';
import { minimalRepairCostRate } from '~/reliability/minimal-repair';
import { fitPowerLaw, type PowerLawFit } from '~/reliability/power-law';
import { weibullDraws } from '~/reliability/quasi-random-draws';
import { weibullRenewalFunction } from '~/reliability/renewal-function';
import { lifeHistories } from '~/reliability/life-histories';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const month = 30.4375;

function wearing(shape = 3): Pick<ScheduleInput, 'fit' | 'lives'> & { fit: PowerLawFit } {
  const { histories } = lifeHistories(simulateClass(seededRandom(7), { ...usualClass, shape }));
  const fit = fitPowerLaw(histories);
  if (fit.kind !== 'fit') throw new Error('the simulated class has a fit');
  return { fit, lives: summariseLives(histories) };
}

const usual = {
  clock: 'calendar-days',
  ...wearing(),
  patchedShare: 0,
  costs: { plannedMinor: 18_000, failureMinor: 145_000, groupPlannedMinor: null },
  current: { interval: 730, task: 'Seal replacement' },
  positions: 30,
  unitsAYear: 365.25,
  isGroup: false,
  maskedAge: null,
  hidden: null,
} as const satisfies ScheduleInput;

function priced(differences: Partial<ScheduleInput> = {}): PricedSchedule {
  const findings = scheduleFindingsSchema.parse(
    JSON.parse(JSON.stringify(priceSchedule({ ...usual, ...differences }))),
  );
  if (findings.kind !== 'priced') throw new Error(`not priced: ${findings.kind}`);
  return findings;
}

describe('the price of a schedule', () => {
  it('is that of age replacement, a year and the whole class', () => {
    const findings = priced();
    const costs = { planned: 18_000, failure: 145_000 };
    const perYear = (interval: number | null) =>
      Math.round(ageReplacementCostRate(interval, usual.fit, costs) * 365.25 * 30);
    expect(findings.policy).toBe('age-replacement');
    expect(findings.best.exact).toBe(bestAgeReplacement(usual.fit, costs));
    expect(findings.best.interval).toBe(Math.round((findings.best.exact ?? 0) / month) * month);
    expect(findings.today.value).toBe(perYear(730));
    expect(findings.changes.best?.costPerYear.value).toBe(perYear(findings.best.interval));
    expect(findings.changes.stop.costPerYear.value).toBe(perYear(null));
    for (const { interval, cost } of findings.curve) expect(cost).toBe(perYear(interval));
  });

  it('says in how many of the 400 draws a change saves money, and the middle 80 % of the saving', () => {
    const findings = priced({
      costs: { ...usual.costs, failureMinor: 30_000 },
      current: { interval: 600, task: null },
    });
    const costs = { planned: 18_000, failure: 30_000 };
    const best = findings.best.interval;
    const savings = weibullDraws(usual.fit)
      .map((draw) => ageReplacementCostRate(600, draw, costs) - ageReplacementCostRate(best, draw, costs))
      .map((saving) => saving * 365.25 * 30)
      .sort((a, b) => a - b);
    const { savingPerYear, share } = findings.changes.best!;
    expect(share).toBe(savings.filter((saving) => saving > 0).length / 400);
    expect(savings.filter((saving) => saving < savingPerYear.low - 1).length / 400).toBeCloseTo(0.1, 1);
    expect(savings.filter((saving) => saving > savingPerYear.high + 1).length / 400).toBeCloseTo(0.1, 1);
  });

  it('is nothing where nothing would change, and the break-even cost of a failure makes it nothing', () => {
    const best = priced().best.interval!;
    const same = priced({ current: { interval: best, task: null } });
    expect(same.changes.best).toMatchObject({ savingPerYear: { value: 0, low: 0, high: 0 }, share: 0 });
    const fewer = priced({ current: { interval: null, task: null } });
    const even = fewer.changes.best!.breakEvenFailureMinor!;
    const at = (interval: number | null) =>
      ageReplacementCostRate(interval, usual.fit, { planned: 18_000, failure: even });
    expect(at(null) / at(fewer.best.interval)).toBeCloseTo(1, 4);
  });

  it('is that of minimal repair where most failures were patched', () => {
    const findings = priced({ patchedShare: 0.51 });
    expect(findings.policy).toBe('minimal-repair');
    const rate = minimalRepairCostRate(730, usual.fit, { planned: 18_000, failure: 145_000 });
    expect(findings.today.value).toBe(Math.round(rate * 365.25 * 30));
    // At the fit, the failures expected at the ages under watch are those seen.
    const exposure = usual.lives.exposureByAge.reduce((sum, band) => sum + band.exposure, 0);
    expect(
      hazardAtWatchedAges(usual.lives.exposureByAge, usual.fit) / (usual.fit.failures / exposure),
    ).toBeCloseTo(1, 1);
    expect(findings.changes.stop.costPerYear.value).toBe(
      Math.round(hazardAtWatchedAges(usual.lives.exposureByAge, usual.fit) * 145_000 * 365.25 * 30),
    );
  });

  it('is that of block replacement at the group price where items are held or renewed in groups', () => {
    const findings = priced({ costs: { ...usual.costs, groupPlannedMinor: 9_000 } });
    expect(findings.policy).toBe('block-replacement');
    expect(findings.costs.plannedMinor).toBe(9_000);
    const failures = weibullRenewalFunction(usual.fit, 730, 1500);
    const rate = blockReplacementCostRate(730, failures, { planned: 9_000, failure: 145_000 });
    expect(findings.today.value / (rate * 365.25 * 30)).toBeCloseTo(1, 2);
    expect(priced({ isGroup: true }).policy).toBe('block-replacement');
    expect(priced({ isGroup: true }).costs.plannedMinor).toBe(18_000);
  });

  it('is asked for where a cost is missing or nothing', () => {
    const without = (costs: Partial<ScheduleInput['costs']>) =>
      priceSchedule({ ...usual, costs: { ...usual.costs, ...costs } });
    expect(without({ plannedMinor: null })).toMatchObject({ kind: 'costs-missing', missing: ['planned'] });
    expect(without({ plannedMinor: 0, failureMinor: null })).toMatchObject({
      kind: 'costs-missing',
      missing: ['planned', 'failure'],
      current: { interval: 730 },
    });
  });

  it('cannot be had without a fit, or with one so wide that no price comes out', () => {
    const none = { kind: 'cannot-be-estimated', reason: { code: 'no-failures' } } as const;
    expect(priceSchedule({ ...usual, fit: none })).toMatchObject({ kind: 'no-fit', reason: 'no-shape' });
    const broken = { ...usual.fit, covariance: { lnShape: Infinity, lnScale: 1, cross: 0 } };
    expect(priceSchedule({ ...usual, fit: broken })).toMatchObject({
      kind: 'no-fit',
      reason: 'out-of-range',
    });
  });
});

describe('the best interval', () => {
  it('is cut off at the longest age that 5 items were seen to reach', () => {
    const lives = summariseLives(
      [90, 200, 400, 150, 300, 500].map((exit) => ({ entry: 0, exit, failures: [] })),
    );
    expect(lives.supportedAge).toBe(150);
    const findings = priced({ lives });
    expect(findings.best).toMatchObject({ beyondData: true, interval: 4 * month });
    expect(findings.best.exact).toBeGreaterThan(150);
    const four = summariseLives(
      usual.lives.exposureByAge.slice(0, 4).map(({ to }) => ({ entry: 0, exit: to, failures: [] })),
    );
    expect(four.supportedAge).toBeNull();
    expect(priced({ lives: four }).best).toMatchObject({ beyondData: true, interval: null });
  });

  it('comes with a trial beyond it where the schedule hides what comes after', () => {
    const findings = priced({ maskedAge: 240, current: { interval: 240, task: null } });
    expect(findings.changes.trial?.interval).toBe(12 * month);
    expect(priced({ maskedAge: 240 }).changes.trial).toBeNull();
  });
});

describe('failure finding', () => {
  const hidden = { requiredAvailability: 0.99, failures: 4, exposure: 40_000 };

  it('gives the longest test interval for the availability, never rounded up', () => {
    const { failureFinding } = priced({ hidden });
    expect(failureFinding?.interval).toBeCloseTo(failureFindingInterval(0.99, 10_000), 9);
    expect(failureFinding?.ruleOfThumb).toBeCloseTo(200, 9);
    expect(failureFinding?.practicable).toBe(6 * month);
    expect(failureFinding?.cautiousInterval).toBeLessThan(failureFinding?.interval ?? 0);
  });

  it('goes by the lower end of the mean time where nothing has failed yet', () => {
    const { failureFinding } = priced({ hidden: { ...hidden, failures: 0 } });
    expect(failureFinding).toMatchObject({ meanTime: null, interval: null, ruleOfThumb: null });
    expect(failureFinding?.practicable).toBeLessThanOrEqual(failureFinding?.cautiousInterval ?? 0);
  });
});

describe('intervals that can be kept', () => {
  it('are whole weeks, whole months, or hours to two digits', () => {
    expect(practicableInterval(2, 'calendar-days')).toBe(7);
    expect(practicableInterval(60, 'calendar-days')).toBe(63);
    expect(practicableInterval(155, 'calendar-days')).toBe(5 * month);
    expect(practicableInterval(155, 'calendar-days', 'down')).toBe(5 * month);
    expect(practicableInterval(6.9, 'calendar-days', 'down')).toBeNull();
    expect(practicableInterval(2187, 'operating-hours')).toBe(2200);
    expect(practicableInterval(2187, 'operating-hours', 'down')).toBe(2100);
    fc.assert(
      fc.property(
        fc.double({ min: 1e-3, max: 1e6, noNaN: true }),
        fc.constantFrom('calendar-days', 'operating-hours'),
        (x, clock) => {
          const down = practicableInterval(x, clock, 'down');
          if (down !== null) expect(down).toBeLessThanOrEqual(x * (1 + 1e-9));
          expect(practicableInterval(practicableInterval(x, clock), clock)).toBe(
            practicableInterval(x, clock),
          );
        },
      ),
    );
  });

  it('are said as people say them', () => {
    expect(intervalWords(365, 'calendar-days')).toBe('12 months');
    expect(intervalWords(56, 'calendar-days')).toBe('8 weeks');
    expect(intervalWords(100, 'calendar-days')).toBe('100 days');
    expect(intervalWords(1461, 'calendar-days')).toBe('4 years');
    expect(intervalWords(2100, 'operating-hours')).toBe('2\u202f100\u202fh');
    expect(changeWords(365, 5 * month, 'calendar-days')).toBe('from 12 months to 5');
    expect(changeWords(365, 56, 'calendar-days')).toBe('from 12 months to 8 weeks');
    expect(changeWords(3000, 2100, 'operating-hours')).toBe('from 3\u202f000\u202fh to 2\u202f100\u202fh');
    expect(ageWords(1343, 'calendar-days')).toBe('3.7 years');
    expect(ageWords(2187, 'operating-hours')).toBe('2\u202f187\u202fh');
    expect(everyWords(7, 'calendar-days')).toBe('every week');
  });
});

it('tells finite numbers or says why not, for any valid input', () => {
  const anyFit = fc
    .record({
      shape: fc.oneof(fc.double({ min: 0.2, max: 12, noNaN: true }), fc.constantFrom(1e-3, 1e3)),
      scale: fc.oneof(fc.double({ min: 1, max: 1e5, noNaN: true }), fc.constantFrom(1e-6, 1e9)),
      error: fc.double({ min: 0.01, max: 3, noNaN: true }),
      tilt: fc.double({ min: -0.99, max: 0.99, noNaN: true }),
    })
    .map(({ shape, scale, error, tilt }): PowerLawFit => {
      const scaleError = error / shape;
      const covariance = { lnShape: error ** 2, lnScale: scaleError ** 2, cross: tilt * error * scaleError };
      return { ...usual.fit, shape, scale, covariance };
    });
  const money = fc.option(fc.integer({ min: 0, max: 1e9 }), { nil: null });
  const anyLength = fc.option(fc.double({ min: 0.5, max: 1e5, noNaN: true }), { nil: null });
  const exits = fc.array(fc.double({ min: 0.5, max: 1e5, noNaN: true }), { maxLength: 20 });
  const anyInput = fc.record({
    clock: fc.constantFrom('calendar-days' as const, 'operating-hours' as const),
    fit: anyFit,
    lives: exits.map((ages) => summariseLives(ages.map((exit) => ({ entry: 0, exit, failures: [] })))),
    patchedShare: fc.double({ min: 0, max: 1, noNaN: true }),
    costs: fc.record({ plannedMinor: money, failureMinor: money, groupPlannedMinor: money }),
    current: fc.record({ interval: anyLength, task: fc.constant(null) }),
    positions: fc.nat(100_000),
    unitsAYear: fc.double({ min: 1, max: 8766, noNaN: true }),
    isGroup: fc.boolean(),
    maskedAge: anyLength,
    hidden: fc.option(
      fc.record({
        requiredAvailability: fc.double({ min: 0.01, max: 0.9999, noNaN: true }),
        failures: fc.nat(50),
        exposure: fc.double({ min: 1, max: 1e7, noNaN: true }),
      }),
      { nil: null },
    ),
  });
  fc.assert(
    fc.property(anyInput, (input) => {
      const findings = scheduleFindingsSchema.parse(priceSchedule(input));
      if (findings.kind !== 'priced') return;
      const { best, supportedAge, curve } = findings;
      if (best.interval !== null) expect(best.interval).toBeLessThanOrEqual((supportedAge ?? 0) * (1 + 1e-9));
      expect(curve).toHaveLength(60);
      for (const { cost, low, high } of curve) expect(low <= cost && cost <= high).toBe(true);
    }),
    { numRuns: 50 },
  );
});

describe('trying a number', () => {
  const costs = { plannedMinor: 18_000, failureMinor: 145_000 };
  const kinds = {
    'by age': {},
    patched: { patchedShare: 0.8 },
    'in groups': { isGroup: true },
  } satisfies Record<string, Partial<ScheduleInput>>;

  for (const [name, differences] of Object.entries(kinds)) {
    it(`gives the night's own answer for the night's own numbers, ${name}`, () => {
      const night = priced(differences);
      const best = tryInterval(night, { interval: night.best.interval, ...costs }, 'calendar-days')!;
      expect(best.change).toEqual(night.changes.best);
      expect(best.schedule).toEqual({ ...night, changes: { ...night.changes, trial: null } });
      const stop = tryInterval(night, { interval: null, ...costs }, 'calendar-days')!;
      expect(stop.change).toEqual(night.changes.stop);
    });
  }

  it("changes nothing at today's interval, and prices any other at other costs", () => {
    const night = priced();
    const today = tryInterval(night, { interval: 730, ...costs }, 'calendar-days')!;
    expect(today.change).toMatchObject({ savingPerYear: { value: 0, low: 0, high: 0 }, share: 0 });
    const other = tryInterval(
      night,
      { interval: 411, plannedMinor: 500, failureMinor: 9_000 },
      'calendar-days',
    )!;
    const rate = ageReplacementCostRate(411, usual.fit, { planned: 500, failure: 9_000 });
    expect(other.change.costPerYear.value).toBe(Math.round(rate * 365.25 * 30));
    expect(other.schedule.costs).toEqual({ plannedMinor: 500, failureMinor: 9_000 });
  });

  it('draws the curve beyond whatever is tried', () => {
    const far = tryInterval(priced(), { interval: 9000, ...costs }, 'calendar-days')!;
    expect(far.schedule.curve.at(-1)!.interval).toBeGreaterThan(9000);
  });

  it('prices a class whose costs nobody has given', () => {
    const night = priceSchedule({
      ...usual,
      costs: { plannedMinor: null, failureMinor: null, groupPlannedMinor: null },
    });
    expect(night.kind).toBe('costs-missing');
    expect(tryInterval(night, { interval: 411, ...costs }, 'calendar-days')?.change.share).toBeGreaterThan(0);
  });

  it('gives no price where there is no life shape', () => {
    const night = priceSchedule({
      ...usual,
      fit: { kind: 'cannot-be-estimated', reason: { code: 'no-failures' } },
    });
    expect(tryInterval(night, { interval: 365, ...costs }, 'calendar-days')).toBeNull();
  });
});
