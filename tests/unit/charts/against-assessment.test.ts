import { describe, expect, it } from 'vitest';
import { classFigures, exposureUnits } from '~/advice/class-figures';
import { layoutAgeRank } from '~/charts/age-rank-layout';
import { layoutCostByInterval } from '~/charts/cost-by-interval-layout';
import { layoutCumulativeFailures } from '~/charts/cumulative-failures-layout';
import { layoutHazardByAge } from '~/charts/hazard-by-age-layout';
import type { ChartSize } from '~/charts/plot-frame';
import { constantRateBand } from '~/reliability/constant-rate-band';
import { weibullHazard } from '~/reliability/weibull';
import { anEvidence, findingsOf } from '../../support/class-evidence';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const findings = findingsOf(
  anEvidence(simulateClass(seededRandom(7), { ...usualClass, shape: 3 }), {
    costs: { plannedMinor: 18_000, failureMinor: 145_000, groupPlannedMinor: null },
    currentTask: { name: 'Seal round', interval: 730 },
  }),
);
const figures = classFigures(findings);
const year = exposureUnits['calendar-days'];
const { fit } = findings.life;
if (fit.kind !== 'fit' || findings.schedule.kind !== 'priced')
  throw new Error('the simulated class is fitted and priced');
const { schedule } = findings;

// Drawing units are rounded to tenths.
const digits = 0;

it('says that steps left the band only where they did, however coarsely it is drawn', () => {
  const year = 365.25;
  const at = (exposures: number[]) =>
    classFigures({
      ...findings,
      trend: { ...findings.trend, failureExposures: exposures, totalExposure: 100 * year },
    }).cumulative.staysInBand;
  expect(at(Array.from({ length: 99 }, (_, index) => (index + 1) * year))).toBe(true);
  expect(at(Array.from({ length: 99 }, (_, index) => 100 * year * ((index + 1) / 100) ** 0.4))).toBe(false);
  expect(at(Array.from({ length: 2000 }, (_, index) => ((index + 1) / 20.01) * year))).toBe(true);
});

describe.each(['wide', 'narrow'] as ChartSize[])('drawn from an assessment, %s', (size) => {
  it('the failures stand where their exposure and number say, within the band of a constant rate', () => {
    const layout = layoutCumulativeFailures(figures.cumulative, size)!;
    const { observed, upper, lower, xScale, yScale, constantRate } = layout;
    const { failures } = findings.rate.overall;
    expect(xScale.domain()).toEqual([0, findings.trend.totalExposure / year]);
    for (const [index, exposure] of findings.trend.failureExposures.entries()) {
      const point = { x: xScale(exposure / year), y: yScale(index + 1) };
      const nearest = Math.min(...observed.map(({ x, y }) => Math.hypot(x - point.x, y - point.y)));
      expect(nearest).toBeLessThan(3);
    }
    expect(constantRate.at(-1)).toEqual({
      x: xScale(findings.trend.totalExposure / year),
      y: yScale(failures),
    });
    const [middle] = constantRateBand(failures, [0.5]);
    const half = xScale(findings.trend.totalExposure / year / 2);
    const at = (points: readonly { x: number; y: number }[]) =>
      points.reduce((best, point) => (Math.abs(point.x - half) < Math.abs(best.x - half) ? point : best));
    expect(Math.abs(at(upper).y - yScale(middle!.high))).toBeLessThan(6);
    expect(Math.abs(at(lower).y - yScale(middle!.low))).toBeLessThan(6);
  });

  it('the hazard bars are the rates of their ages with their intervals, the curve is the fit', () => {
    const layout = layoutHazardByAge(figures.hazard, size)!;
    const { steps, fitted, xScale, yScale } = layout;
    expect(steps).toHaveLength(findings.life.hazardBands.length);
    for (const [index, band] of findings.life.hazardBands.entries()) {
      const step = steps[index]!;
      expect(step.x1).toBeCloseTo(xScale(band.from), digits);
      expect(step.x2).toBeCloseTo(xScale(band.to), digits);
      expect(step.rateY).toBeCloseTo(yScale(band.rate * year), digits);
      expect(step.lowY).toBeCloseTo(yScale(band.low * year), digits);
      if (!step.isCut) expect(step.highY).toBeCloseTo(yScale(band.high * year), digits);
    }
    for (const { x, y } of fitted.slice(1)) {
      const age = xScale.invert(x);
      const rate = Math.min(weibullHazard(fit, age) * year, yScale.domain()[1]!);
      expect(Math.abs(y - yScale(rate))).toBeLessThan(2);
    }
  });

  it('the strip has a mark a failure at the share of its peers that were younger', () => {
    const { marks, meanShare } = findings.ageRank;
    const data = {
      marks: marks.map(({ share }) => ({ share, label: '' })),
      meanShare: meanShare!,
      verdict: 'wear-out' as const,
    };
    const { drawn, failuresPerMark, mean, xScale } = layoutAgeRank(data, size)!;
    expect(Math.abs(drawn.length * failuresPerMark - marks.length)).toBeLessThan(drawn.length);
    expect(mean?.x).toBeCloseTo(xScale(meanShare!), digits);
    // Crowded to the old end: as many to the right of the middle as there are failures of the older half.
    const older = marks.filter(({ share }) => share > 0.5).length / marks.length;
    const right = drawn.filter(({ x, width }) => x + width / 2 > xScale(0.5)).length / drawn.length;
    expect(right).toBeCloseTo(older, 1);
  });

  it('the cost curve, its band and its marks are the prices of the night', () => {
    const { curve, changes, today, current, best } = schedule;
    const layout = layoutCostByInterval(
      {
        curve,
        runToFailure: { cost: changes.stop.costPerYear.value },
        today: { interval: current.interval!, cost: today.value },
        best: { interval: best.interval!, cost: changes.best!.costPerYear.value },
        currency: 'GBP',
        intervalUnit: 'day',
      },
      size,
    )!;
    const { xScale, yScale, upper, lower, markers, failureLine } = layout;
    const top = yScale.domain()[1]!;
    for (const { interval, low, high } of curve.filter((point) => point.high < top)) {
      const near = (points: readonly { x: number; y: number }[]) =>
        Math.min(
          ...points.map(({ x, y }) =>
            Math.hypot(x - xScale(interval), y - yScale(points === upper ? high : low)),
          ),
        );
      expect(near(upper)).toBeLessThan(9);
      expect(near(lower)).toBeLessThan(9);
    }
    const [todayMark, bestMark] = markers;
    expect(todayMark?.x).toBeCloseTo(xScale(current.interval!), digits);
    expect(todayMark?.y).toBeCloseTo(yScale(today.value), digits);
    expect(bestMark?.x).toBeCloseTo(xScale(best.interval!), digits);
    expect(bestMark?.y).toBeCloseTo(yScale(changes.best!.costPerYear.value), digits);
    expect(failureLine?.y).toBeCloseTo(yScale(changes.stop.costPerYear.value), digits);
  });
});
