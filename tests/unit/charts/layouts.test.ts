import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import { layoutAgeRank } from '~/charts/age-rank-layout';
import { layoutCostByInterval, type CostByIntervalData } from '~/charts/cost-by-interval-layout';
import { layoutCumulativeFailures } from '~/charts/cumulative-failures-layout';
import { layoutHazardByAge } from '~/charts/hazard-by-age-layout';
import { isInside, overlaps, type PlacedLabel } from '~/charts/label-placement';
import type { ChartSize, PlotFrame } from '~/charts/plot-frame';
import { layoutVerdictHistory } from '~/charts/verdict-history-layout';

const SIZES: ChartSize[] = ['wide', 'narrow'];

function expectTidyLabels(frame: PlotFrame, labels: readonly PlacedLabel[]) {
  const drawing = { x: 0, y: 0, width: frame.width, height: frame.height };
  for (const [index, label] of labels.entries()) {
    expect(isInside(label.box, drawing), label.lines.join(' ')).toBe(true);
    for (const other of labels.slice(index + 1)) expect(overlaps(label.box, other.box)).toBe(false);
  }
}

describe.each(SIZES)('cumulative failures, %s', (size) => {
  const steps = Array.from({ length: 20 }, (_, index) => ({ exposure: 5 * (index + 1), count: index + 1 }));
  const data = {
    steps,
    totalExposure: 100,
    band: [0, 50, 100].map((exposure) => ({ exposure, low: exposure / 10, high: exposure / 4 })),
    powerLaw: [0, 25, 50, 100].map((exposure) => ({ exposure, expected: 20 * (exposure / 100) ** 2 })),
  };
  const layout = layoutCumulativeFailures(data, size);

  it('puts every failure where its exposure and count say', () => {
    const { observed, xScale, yScale } = layout ?? expect.fail('nothing laid out');
    expect(observed).toHaveLength(steps.length + 1);
    expect(observed[0]).toEqual({ x: xScale(0), y: yScale(0) });
    for (const [index, { exposure, count }] of steps.entries()) {
      expect(observed[index + 1]?.x).toBeCloseTo(xScale(exposure), 0);
      expect(observed[index + 1]?.y).toBeCloseTo(yScale(count), 0);
    }
  });

  it('draws the constant rate straight from nothing to all failures', () => {
    expect(layout?.constantRate).toEqual([
      { x: layout?.xScale(0), y: layout?.yScale(0) },
      { x: layout?.xScale(100), y: layout?.yScale(20) },
    ]);
  });

  it('draws band and power law inside the plot, labels apart', () => {
    const { frame, upper, lower, power, labels, yScale } = layout ?? expect.fail('nothing laid out');
    expect(upper.at(-1)?.y).toBeCloseTo(yScale(25), 0);
    expect(lower.at(-1)?.y).toBeCloseTo(yScale(10), 0);
    expect(power[2]?.y).toBeCloseTo(yScale(5), 0);
    expect(labels.map(({ lines }) => lines[0])).toContain('observed');
    expect(labels).toHaveLength(4);
    expectTidyLabels(frame, labels);
  });

  it('is nothing without exposure or without a failure', () => {
    expect(layoutCumulativeFailures({ ...data, totalExposure: 0 }, size)).toBeNull();
    expect(layoutCumulativeFailures({ ...data, totalExposure: NaN }, size)).toBeNull();
    expect(layoutCumulativeFailures({ ...data, steps: [] }, size)).toBeNull();
  });
});

describe.each(SIZES)('age-rank strip, %s', (size) => {
  const even = (count: number) =>
    Array.from({ length: count }, (_, index) => ({ share: (index + 0.5) / count, label: `${index}` }));

  it.each([1, 7, 60, 500, 2000])('draws one mark for each of %d failures without covering any', (count) => {
    const layout = layoutAgeRank({ marks: even(count), meanShare: 0.5, verdict: 'memoryless' }, size);
    const { drawn, frame, labels } = layout ?? expect.fail('nothing laid out');
    expect(layout?.failuresPerMark).toBe(1);
    expect(drawn).toHaveLength(count);
    for (const x of new Set(drawn.map((mark) => mark.x))) {
      const column = drawn.filter((mark) => mark.x === x);
      for (const [index, mark] of column.entries()) {
        const above = column[index + 1];
        if (above !== undefined) expect(above.y + above.height).toBeLessThanOrEqual(mark.y);
      }
    }
    for (const mark of drawn) expect(isInside(mark, frame.plot)).toBe(true);
    expectTidyLabels(frame, labels);
  });

  it('stands level with the line of no difference when marks are spread evenly', () => {
    const layout = layoutAgeRank({ marks: even(400), meanShare: 0.5, verdict: 'memoryless' }, size);
    const tops = Math.min(...(layout?.drawn ?? []).map(({ y }) => y));
    expect(Math.abs(tops - (layout?.levelY ?? 0))).toBeLessThan(10);
  });

  it('lets one mark be several failures when all have the same share, and says so', () => {
    const marks = Array.from({ length: 2000 }, () => ({ share: 0.9, label: '' }));
    const layout = layoutAgeRank({ marks, meanShare: 0.9, verdict: 'wear-out' }, size);
    const perMark = layout?.failuresPerMark ?? 0;
    expect(perMark).toBeGreaterThan(1);
    expect(layout?.drawn).toHaveLength(Math.ceil(2000 / perMark));
    expect(layout?.labels.some(({ lines }) => lines[0]?.includes(`${perMark} failures`))).toBe(true);
  });

  it('puts the average and its interval at their shares', () => {
    const marks = even(10);
    const layout = layoutAgeRank(
      { marks, meanShare: 0.71, meanInterval: [0.6, 0.8], verdict: 'wear-out' },
      size,
    );
    expect(layout?.mean?.x).toBeCloseTo(layout?.xScale(0.71) ?? 0, 0);
    expect(layout?.mean?.low).toBeCloseTo(layout?.xScale(0.6) ?? 0, 0);
    expect(layout?.mean?.high).toBeCloseTo(layout?.xScale(0.8) ?? 0, 0);
  });

  it('leaves out marks that tell nothing', () => {
    const marks = [
      { share: 0.5, weight: 0, label: 'all of one age' },
      { share: NaN, label: 'no ages' },
    ];
    expect(layoutAgeRank({ marks, meanShare: 0.5, verdict: 'undecided' }, size)).toBeNull();
  });
});

describe.each(SIZES)('hazard by age, %s', (size) => {
  const band = { from: 0, to: 60, rate: 0.2, low: 0.1, high: 0.4, failures: 5, exposure: 900 };
  const bands = [band, { ...band, from: 60, to: 200, rate: 0.5, low: 0.3, high: 20 }];
  const curve = Array.from({ length: 50 }, (_, index) => ({ age: 6 * index + 1, rate: 0.01 * index }));

  it('puts bands at their ages and rates, and marks a whisker that is cut', () => {
    const { steps, xScale, yScale } =
      layoutHazardByAge({ bands, curve, notSeenFrom: 200 }, size) ?? expect.fail('nothing laid out');
    expect(steps.map(({ x1 }) => x1)).toEqual([0, 60].map((age) => expect.closeTo(xScale(age), 0)));
    expect(steps.map(({ rateY }) => rateY)).toEqual(
      [0.2, 0.5].map((rate) => expect.closeTo(yScale(rate), 0)),
    );
    expect(steps.map(({ isCut }) => isCut)).toEqual([false, true]);
  });

  it('hatches what was not seen and draws the curve there apart', () => {
    const { hatch, fitted, beyond, xScale, frame, labels } =
      layoutHazardByAge({ bands, curve, notSeenFrom: 200 }, size) ?? expect.fail('nothing laid out');
    expect(hatch?.x).toBeCloseTo(xScale(200), 0);
    expect((hatch?.x ?? 0) + (hatch?.width ?? 0)).toBeCloseTo(frame.plot.x + frame.plot.width, 0);
    expect(Math.max(...fitted.map(({ x }) => x))).toBeLessThanOrEqual(xScale(200));
    expect(beyond.at(-1)?.x).toBeCloseTo(xScale(curve.at(-1)?.age ?? 0), 0);
    expectTidyLabels(frame, labels);
  });

  it('is nothing without bands and curve, or when nothing ever failed', () => {
    expect(layoutHazardByAge({ bands: [], curve: [] }, size)).toBeNull();
    const none = { ...band, rate: 0, low: 0, high: 0 };
    expect(layoutHazardByAge({ bands: [none], curve: [] }, size)).toBeNull();
  });
});

describe.each(SIZES)('cost by interval, %s', (size) => {
  const curve = Array.from({ length: 40 }, (_, index) => {
    const interval = 1 + index * 0.4;
    const cost = Math.round(400000 / interval + 6000 * interval ** 1.5);
    return { interval, cost, low: Math.round(cost * 0.8), high: Math.round(cost * 1.3) };
  });
  const data: CostByIntervalData = {
    curve,
    runToFailure: { cost: 340000 },
    today: { interval: 12, cost: 282746 },
    best: { interval: 5.8, cost: 152770 },
    supportedUntil: 14,
    currency: 'GBP',
    intervalUnit: 'month',
  };

  it('puts today and the best at their interval and cost', () => {
    const { markers, xScale, yScale, failureLine, hatch, frame, labels } =
      layoutCostByInterval(data, size) ?? expect.fail('nothing laid out');
    expect(markers.map(({ word }) => word)).toEqual(['today', 'best']);
    expect(markers[0]?.x).toBeCloseTo(xScale(12), 0);
    expect(markers[0]?.y).toBeCloseTo(yScale(282746), 0);
    expect(failureLine?.y).toBeCloseTo(yScale(340000), 0);
    expect(hatch?.x).toBeCloseTo(xScale(14), 0);
    expectTidyLabels(frame, labels);
  });

  it('cuts the curve where it leaves the plot', () => {
    const dear = { interval: 0.01, cost: 4e9, low: 3e9, high: 5e9 };
    const { line, frame } =
      layoutCostByInterval({ ...data, curve: [dear, ...curve] }, size) ?? expect.fail('nothing laid out');
    expect(line[0]?.y).toBeCloseTo(frame.plot.y, 0);
    for (const { y } of line) expect(y).toBeGreaterThanOrEqual(frame.plot.y - 0.1);
  });

  it('marks what somebody tries beside them', () => {
    const tried = { interval: 9, cost: 200_000 };
    const { markers, xScale } =
      layoutCostByInterval({ ...data, tried }, size) ?? expect.fail('nothing laid out');
    expect(markers.map(({ word }) => word)).toEqual(['today', 'best', 'tried']);
    expect(markers[2]?.x).toBeCloseTo(xScale(9), 0);
    const same = layoutCostByInterval({ ...data, tried: data.best }, size);
    expect(same?.markers.map(({ word }) => word)).toEqual(['today', 'best and tried']);
  });

  it('marks one place when today is the best', () => {
    const layout = layoutCostByInterval({ ...data, today: data.best }, size);
    expect(layout?.markers.map(({ word }) => word)).toEqual(['today and best']);
  });

  it('is nothing with fewer than two intervals or no cost', () => {
    expect(layoutCostByInterval({ ...data, curve: curve.slice(0, 1) }, size)).toBeNull();
    const free = curve.map((point) => ({ ...point, cost: 0, low: 0, high: 0 }));
    expect(layoutCostByInterval({ ...data, curve: free }, size)).toBeNull();
  });
});

describe('verdict history', () => {
  const run = (verdict: 'undecided' | 'wear-out', from: string, to: string) => ({
    verdict,
    from,
    to,
    nights: 1,
    n: 10,
    why: null,
  });
  const runs = [run('undecided', '2026-11-01', '2026-11-08'), run('wear-out', '2026-11-11', '2026-11-15')];

  it('gives each run its share of the time, up to the run that follows', () => {
    const layout = layoutVerdictHistory(runs, 'wide') ?? expect.fail('nothing laid out');
    const [first, second] = layout.stretches;
    expect((first?.width ?? 0) / (second?.width ?? 1)).toBeCloseTo(2, 1);
    expect((first?.x ?? 0) + (first?.width ?? 0)).toBeCloseTo(second?.x ?? 0, 0);
    expect((second?.x ?? 0) + (second?.width ?? 0)).toBeCloseTo(
      layout.frame.plot.x + layout.frame.plot.width,
      0,
    );
    expect(layout.dates.map(({ text }) => text)).toEqual(['1 Nov 2026', '15 Nov 2026']);
  });

  it('has nothing to lay out before the first night, and a width for a single one', () => {
    expect(layoutVerdictHistory([], 'wide')).toBeNull();
    const single = layoutVerdictHistory([run('wear-out', '2026-11-01', '2026-11-01')], 'narrow')!;
    expect(single.stretches[0]!.width).toBeCloseTo(single.frame.plot.width, 0);
    expect(single.dates).toHaveLength(1);
  });
});

it('keeps labels of any cumulative chart inside it and apart', () => {
  const exposures = fc.array(fc.double({ min: 0, max: 1000, noNaN: true }), { minLength: 1, maxLength: 60 });
  fc.assert(
    fc.property(
      exposures,
      fc.constantFrom(...SIZES),
      fc.double({ min: 0.3, max: 3, noNaN: true }),
      (at, size, beta) => {
        const steps = at.sort((a, b) => a - b).map((exposure, index) => ({ exposure, count: index + 1 }));
        const grid = Array.from({ length: 21 }, (_, index) => index * 50);
        const layout = layoutCumulativeFailures(
          {
            steps,
            totalExposure: 1000,
            band: grid.map((exposure) => ({
              exposure,
              low: 0,
              high: at.length * 1.5 * (exposure / 1000) + 1,
            })),
            powerLaw: grid.map((exposure) => ({ exposure, expected: at.length * (exposure / 1000) ** beta })),
          },
          size,
        );
        if (layout !== null) expectTidyLabels(layout.frame, layout.labels);
      },
    ),
    { numRuns: 60 },
  );
});
