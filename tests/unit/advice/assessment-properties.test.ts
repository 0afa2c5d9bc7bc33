import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ClassEvidence } from '~/advice/class-evidence';
import { conclusionSchema } from '~/advice/conclusion';
import { findingsSchema } from '~/advice/findings';
import type { ClassRecords, RecordRow } from '~/models/class-records.server';
import { dayNumber, dayOf } from '~/models/day-number';
import { layOutClass } from '~/models/lay-out-class';
import type { Position, PositionEvent } from '~/reliability/position';
import { anEvidence, assessAlone, findingsOf } from '../../support/class-evidence';

const kinds = ['failure-renewed', 'failure-patched', 'planned-renewal', 'other-renewal'] as const;

const event = (watchTo: number) =>
  fc.record({
    // A day, or a minute of one: finer than that no record is.
    at: fc.oneof(
      fc.integer({ min: 0, max: watchTo }),
      fc.integer({ min: 0, max: watchTo * 1440 }).map((minute) => minute / 1440),
    ),
    kind: fc.constantFrom(...kinds),
    mode: fc.constantFrom(null, 'leak', 'crack'),
    itemFittedAt: fc.option(fc.integer({ min: -900, max: watchTo }), { nil: null, freq: 5 }),
  });

/** A position whose records pass every check; its clock runs at `pace` units a day. */
const position = (index: number, pace: number): fc.Arbitrary<Position> =>
  fc
    .record({ before: fc.integer({ min: 0, max: 900 }), watchTo: fc.integer({ min: 1, max: 1500 }) })
    .chain(({ before, watchTo }) =>
      fc
        .record({
          fittedAt: fc.option(fc.integer({ min: -before, max: 0 }), { nil: null }),
          events: fc.array(event(watchTo), { maxLength: 6 }),
        })
        .map(({ fittedAt, events }) => ({
          id: `p${index}`,
          inServiceAt: -before,
          watchFrom: 0,
          watchTo,
          fittedAt,
          usage: { at: (day: number) => day * pace, steadyUnitsPerDay: pace },
          halfResolutionDays: 0.5,
          events: events
            .map((one): PositionEvent => ({
              ...one,
              itemFittedAt: one.itemFittedAt === null ? null : Math.min(one.itemFittedAt, one.at),
            }))
            .sort((a, b) => a.at - b.at),
        })),
    );

const evidence = fc
  .record({
    count: fc.integer({ min: 0, max: 8 }),
    pace: fc.constantFrom(1, 1, 10.5, 1e-6, 1e9),
    planned: fc.option(fc.integer({ min: 0, max: 1_000_000 }), { nil: null }),
    failure: fc.option(fc.integer({ min: 0, max: 100_000_000 }), { nil: null }),
    interval: fc.option(fc.integer({ min: 1, max: 2000 }), { nil: null }),
    hidden: fc.boolean(),
    marked: fc.boolean(),
  })
  .chain(({ count, pace, planned, failure, interval, hidden, marked }) =>
    fc.tuple(...Array.from({ length: count }, (_, index) => position(index, pace))).map((positions) =>
      anEvidence(positions, {
        clock: pace === 1 ? 'calendar-days' : 'operating-hours',
        now: 1500,
        clockUnitsAYear: 365.25 * pace,
        costs: { plannedMinor: planned, failureMinor: failure, groupPlannedMinor: null },
        currentTask: interval === null ? null : { name: 'Renew', interval: interval * pace },
        hiddenFailures: hidden,
        requiredAvailability: hidden ? 0.98 : null,
        sparesLeadTimeDays: 30,
        statutory: marked,
        modes: [
          { id: 'leak', name: 'Leak' },
          { id: 'crack', name: 'Crack' },
        ],
      }),
    ),
  );

/** Where in a value a number stands that is none. */
function oddNumbers(value: unknown, path = ''): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [`${path} is ${value}`];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => oddNumbers(inner, `${path}.${key}`));
}

/** Sums taken in another order may differ in the last digits; nothing else may. */
function toTenDigits(value: object): unknown {
  const round = (_: string, inner: unknown) =>
    typeof inner === 'number' ? Number(inner.toPrecision(10)) : inner;
  return JSON.parse(JSON.stringify(value, round));
}

const withPositions = (input: ClassEvidence, positions: readonly Position[]): ClassEvidence => ({
  ...input,
  positions,
});

describe('whatever valid records say', () => {
  it('no number of an assessment is NaN or infinite, and all of it comes back from storage as it was', () => {
    fc.assert(
      fc.property(evidence, (input) => {
        const findings = findingsOf(input);
        expect(oddNumbers(findings)).toEqual([]);
        expect(findingsSchema.parse(JSON.parse(JSON.stringify(findings)))).toEqual(findings);
        const conclusion = assessAlone(input);
        expect(oddNumbers(conclusion)).toEqual([]);
        expect(conclusionSchema.parse(JSON.parse(JSON.stringify(conclusion)))).toEqual(conclusion);
      }),
      { numRuns: 150 },
    );
  }, 60_000);

  it('marked classes are shown evidence and nothing else', () => {
    fc.assert(
      fc.property(evidence, (input) => {
        fc.pre(input.statutory);
        expect(assessAlone(input).proposal.action).toBe('evidence-only');
      }),
      { numRuns: 60 },
    );
  }, 60_000);

  it('the order in which positions are listed changes no estimate', () => {
    fc.assert(
      fc.property(evidence, (input) => {
        const one = findingsOf(input);
        const other = findingsOf(withPositions(input, [...input.positions].reverse()));
        expect(other.life.fit).toEqual(one.life.fit);
        expect(other.trend.slope).toEqual(one.trend.slope);
        expect(toTenDigits(other.life)).toEqual(toTenDigits(one.life));
        expect(toTenDigits(other.rate)).toEqual(toTenDigits(one.rate));
      }),
      { numRuns: 60 },
    );
  }, 60_000);

  it('positions that were never watched change nothing', () => {
    fc.assert(
      fc.property(evidence, (input) => {
        const unwatched = input.positions.map((one) => ({
          ...one,
          id: `${one.id}-unwatched`,
          watchFrom: 1500,
          watchTo: 1500,
          events: [],
        }));
        const one = findingsOf(input);
        const other = findingsOf(withPositions(input, [...input.positions, ...unwatched]));
        expect(other.life).toEqual(one.life);
        expect(other.trend).toEqual(one.trend);
        expect(other.ageRank).toEqual(one.ageRank);
      }),
      { numRuns: 60 },
    );
  }, 60_000);

  it('shape, slope and tests do not depend on the unit of the clock', () => {
    fc.assert(
      fc.property(evidence, fc.constantFrom(1e-6, 24, 1e6), (input, factor) => {
        const scaled = input.positions.map((one) => ({
          ...one,
          usage: {
            at: (day: number) => one.usage.at(day) * factor,
            steadyUnitsPerDay: one.usage.steadyUnitsPerDay! * factor,
          },
        }));
        const one = findingsOf(input);
        const other = findingsOf(withPositions(input, scaled));
        expect(other.life.fit.kind).toBe(one.life.fit.kind);
        if (one.life.fit.kind === 'fit' && other.life.fit.kind === 'fit') {
          expect(other.life.fit.shape / one.life.fit.shape).toBeCloseTo(1, 8);
          expect(other.life.fit.scale / one.life.fit.scale / factor).toBeCloseTo(1, 8);
        }
        if (one.trend.laplace !== null) expect(other.trend.laplace?.u).toBeCloseTo(one.trend.laplace.u, 8);
        expect(other.ageRank.z ?? 0).toBeCloseTo(one.ageRank.z ?? 0, 8);
      }),
      { numRuns: 60 },
    );
  }, 60_000);
});

describe('a void that is undone', () => {
  const record = fc.record({
    asset: fc.integer({ min: 0, max: 4 }),
    day: fc.integer({ min: 0, max: 900 }),
    renewed: fc.boolean(),
    planned: fc.boolean(),
  });

  it('leaves the assessment as it was, and a void is as if the record had never been', () => {
    fc.assert(
      fc.property(fc.array(record, { minLength: 1, maxLength: 25 }), fc.nat(), (entries, pick) => {
        const rows = entries.map(({ asset, day, renewed, planned }): RecordRow => ({
          assetId: `asset-${asset}`,
          day: dayOf(dayNumber('2024-01-01') + day),
          timeOfDay: null,
          source: planned ? 'planned-work' : 'failure',
          renewed,
          modeId: null,
          outsideCause: null,
          itemFittedOn: null,
          itemAge: null,
          items: null,
          voided: false,
        }));
        const sorted = rows.toSorted(
          (a, b) => a.assetId.localeCompare(b.assetId) || a.day.localeCompare(b.day),
        );
        const chosen = sorted[pick % sorted.length]!;
        const voided = sorted.map((row) => (row === chosen ? { ...row, voided: true } : row));
        const restored = voided.map((row) => ({ ...row, voided: false }));
        const without = sorted.filter((row) => row !== chosen);

        const before = findingsOf(layOut(sorted));
        expect(findingsOf(layOut(restored))).toEqual(before);
        // All but the list of what was left out, which names the voided one.
        const never = findingsOf(layOut(without));
        expect({ ...findingsOf(layOut(voided)), leftOut: null }).toEqual({ ...never, leftOut: null });
      }),
      { numRuns: 60 },
    );
  }, 60_000);

  function layOut(records: RecordRow[]): ClassEvidence {
    const assets = Array.from({ length: 5 }, (_, index) => ({
      id: `asset-${index}`,
      tag: `SD-SEAL-${index}`,
      siteId: 'site-1',
      siteName: 'Saltmarsh Depot',
      quantity: 1,
      inServiceOn: '2024-01-01',
      watchedFrom: '2024-01-01',
      watchedUntil: null,
      retiredOn: null,
      itemFittedOn: null,
      dutyHoursPerDay: null,
    }));
    const assetClass: ClassRecords['assetClass'] = {
      id: 'class-1',
      itemSingular: 'seal',
      itemPlural: 'seals',
      clock: 'calendar-days',
      statutory: false,
      endangersPeople: false,
      hiddenFailures: false,
      plannedCostMinor: 10_000,
      failureCostMinor: 100_000,
      groupPlannedCostMinor: null,
      sparesLeadTimeDays: null,
      requiredAvailability: null,
    };
    return layOutClass(
      { assetClass, assets, records, readings: [], fitted: [], modes: [], renewalTask: null },
      { asOf: '2026-06-30', serviceLevel: 0.95 },
    );
  }
});

describe('very many positions', () => {
  it('100,000 of them with a thousand failures are assessed', { timeout: 120_000 }, () => {
    const positions = Array.from({ length: 100_000 }, (_, index): Position => ({
      id: `p${index}`,
      inServiceAt: -(index % 1000),
      watchFrom: 0,
      watchTo: 1000,
      fittedAt: -(index % 1000),
      usage: { at: (day) => day, steadyUnitsPerDay: 1 },
      halfResolutionDays: 0.5,
      events:
        index % 100 === 0
          ? [{ at: 1 + (index / 100) * 0.99, kind: 'failure-renewed', mode: null, itemFittedAt: null }]
          : [],
    }));
    const findings = findingsOf(anEvidence(positions));
    expect(findings.rate.overall.failures).toBe(1000);
    expect(findings.life.fit.kind).toBe('fit');
    expect(oddNumbers(findings)).toEqual([]);
  });
});
