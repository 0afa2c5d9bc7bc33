import fc from 'fast-check';
import type { ReactElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it, vi } from 'vitest';

import { AgeRankStrip } from '~/charts/age-rank-strip';
import { CostByIntervalChart } from '~/charts/cost-by-interval-chart';
import { CumulativeFailuresChart } from '~/charts/cumulative-failures-chart';
import { HazardByAgeChart } from '~/charts/hazard-by-age-chart';
import { VerdictHistoryStrip } from '~/charts/verdict-history-strip';

// Hundreds of pages are drawn, which a busy machine may take its time over.
vi.setConfig({ testTimeout: 30_000 });

/** Any number at all: NaN, infinities, minus zero, tiny and huge ones included. */
const wild = fc.oneof(
  fc.double(),
  fc.integer({ min: -5, max: 500 }),
  fc.constantFrom(0, -0, NaN, Infinity, 1e300),
);
const plain = fc.oneof(
  fc.integer({ min: 0, max: 400 }),
  fc.double({ min: 0, max: 1e6, noNaN: true }),
  fc.constant(1e-7),
);
const verdict = fc.constantFrom('wear-out', 'memoryless', 'early-life', 'undecided');

function expectSoundMarkup(chart: ReactElement) {
  const markup = renderToStaticMarkup(chart);
  expect(markup).toMatch(/^<figure/);
  expect(markup).not.toMatch(/NaN|Infinity|undefined|="null"/);
  for (const [, size] of markup.matchAll(/ (?:width|height|r)="([^"]*)"/g)) {
    expect(Number(size)).toBeGreaterThanOrEqual(0);
  }
}

describe.each([
  ['any', wild],
  ['orderly', plain],
] as const)('markup from %s numbers', (_, number) => {
  const check = (arbitrary: fc.Arbitrary<ReactElement>) =>
    fc.assert(fc.property(arbitrary, expectSoundMarkup), { numRuns: 60 });
  const list = <T,>(item: fc.Arbitrary<T>) => fc.array(item, { maxLength: 12 });

  it('is sound for cumulative failures', () => {
    check(
      fc
        .record({
          steps: list(fc.record({ exposure: number, count: number })),
          totalExposure: number,
          band: list(fc.record({ exposure: number, low: number, high: number })),
          powerLaw: list(fc.record({ exposure: number, expected: number })),
        })
        .map((data) => <CumulativeFailuresChart {...data} exposureUnit="seal-years" />),
    );
  });

  it('is sound for the age-rank strip', () => {
    const share = fc.oneof(fc.double({ min: 0, max: 1, noNaN: true }), number);
    check(
      fc
        .record({
          marks: list(fc.record({ share, weight: number, label: fc.string() })),
          meanShare: share,
          meanInterval: fc.tuple(share, share),
          verdict,
          weightlessCount: fc.nat(),
        })
        .map((data) => {
          // Labels are free text and may themselves spell out what no attribute may hold.
          const marks = data.marks.map((mark) => ({ ...mark, label: 'a failure' }));
          return <AgeRankStrip {...data} marks={marks} />;
        }),
    );
  });

  it('is sound for hazard by age', () => {
    const band = fc.record({
      from: number,
      to: number,
      rate: number,
      low: number,
      high: number,
      failures: number,
      exposure: number,
    });
    check(
      fc
        .record({
          bands: list(band),
          curve: list(fc.record({ age: number, rate: number })),
          curveBand: list(fc.record({ age: number, low: number, high: number })),
          notSeenFrom: number,
        })
        .map((data) => (
          <HazardByAgeChart {...data} ageUnit="days" itemNoun="seal" rateUnit="failures per seal-year" />
        )),
    );
  });

  it('is sound for cost by interval', () => {
    const point = fc.record({ interval: number, cost: number });
    check(
      fc
        .record({
          curve: list(fc.record({ interval: number, cost: number, low: number, high: number })),
          runToFailure: fc.record({ cost: number, low: number, high: number }),
          today: point,
          best: point,
          supportedUntil: number,
        })
        .map((data) => <CostByIntervalChart {...data} currency="GBP" intervalUnit="month" />),
    );
  });
});

describe('a figure', () => {
  const chart = renderToStaticMarkup(
    <CumulativeFailuresChart
      steps={[1, 2, 4].map((exposure, index) => ({ exposure, count: index + 1 }))}
      totalExposure={5}
      band={[]}
      exposureUnit="fan-years"
    />,
  );

  it('names and describes both drawings by ids that are there', () => {
    const drawings = [...chart.matchAll(/<svg[^>]*role="img"[^>]*>/g)].map(([tag]) => tag);
    expect(drawings).toHaveLength(2);
    for (const tag of drawings) {
      for (const attribute of ['aria-labelledby', 'aria-describedby']) {
        const id = new RegExp(`${attribute}="([^"]+)"`).exec(tag)?.[1] ?? expect.fail(attribute);
        expect(chart.split(`id="${id}"`)).toHaveLength(2);
      }
    }
  });

  it('carries its numbers in a table', () => {
    const table = chart.slice(chart.indexOf('<details'));
    expect(table.match(/<tr>/g)).toHaveLength(4);
    expect(table).toContain('<th scope="col">Failures so far</th>');
  });

  it('draws all text with 14 units or more', () => {
    const sizes = [...chart.matchAll(/font-size="([^"]+)"/g)].map(([, size]) => Number(size));
    expect(sizes.length).toBeGreaterThan(0);
    expect(Math.min(...sizes)).toBeGreaterThanOrEqual(14);
  });
});

it.each([
  [
    'no failure',
    <CumulativeFailuresChart key="1" steps={[]} totalExposure={12} band={[]} exposureUnit="fan-years" />,
    'No failure in 12 fan-years watched',
  ],
  [
    'no exposure',
    <CumulativeFailuresChart key="2" steps={[]} totalExposure={0} band={[]} exposureUnit="fan-years" />,
    'No running time has been watched yet',
  ],
  [
    'all of one age',
    <AgeRankStrip key="3" marks={[]} meanShare={0.5} verdict="undecided" weightlessCount={3} />,
    '3 failures, but each time all peers were of one age',
  ],
  ['no night', <VerdictHistoryStrip key="4" runs={[]} />, 'No night has been assessed yet.'],
])('says in a sentence when there is %s', (_, chart, sentence) => {
  const markup = renderToStaticMarkup(chart);
  expect(markup).toContain(sentence);
  expect(markup).not.toContain('<svg');
});
