import { scaleLinear } from '@visx/scale';

import { formatCount, formatTrimmed } from '~/format/number';
import { fittingTicks } from './fitting-ticks';
import { placeLabels, sampled, spotsAlong, type PlacedLabel } from './label-placement';
import {
  allDrawable,
  isExtent,
  axisRoom,
  plotFrame,
  thinPoints,
  type ChartSize,
  type Point,
} from './plot-frame';

export interface CumulativeFailuresData {
  /** Failures so far at each failure's pooled exposure, any order. */
  readonly steps: readonly { readonly exposure: number; readonly count: number }[];
  readonly totalExposure: number;
  /** 90 % band of the count if the rate were constant. */
  readonly band: readonly { readonly exposure: number; readonly low: number; readonly high: number }[];
  /** Failures expected by the fitted power law. */
  readonly powerLaw?: readonly { readonly exposure: number; readonly expected: number }[];
  /** Whether the steps stay within the band; the sentence says nothing of it where this is left out. */
  readonly staysInBand?: boolean;
}

export type CumulativeFailuresLayout = NonNullable<ReturnType<typeof layoutCumulativeFailures>>;

/** The data a chart can be drawn from: finite, within the exposure, in order; null when there are none. */
export function usableCumulativeFailures(data: CumulativeFailuresData) {
  const { totalExposure } = data;
  if (!isExtent(totalExposure)) return null;
  const within = (exposure: number) => exposure >= 0 && exposure <= totalExposure;
  const steps = data.steps
    .filter(({ exposure, count }) => within(exposure) && isExtent(count))
    .sort((a, b) => a.exposure - b.exposure || a.count - b.count);
  const last = steps.at(-1);
  if (last === undefined) return null;
  const band = data.band
    .filter(
      ({ exposure, low, high }) => within(exposure) && allDrawable(low, high) && low >= 0 && high >= low,
    )
    .sort((a, b) => a.exposure - b.exposure);
  const powerLaw = (data.powerLaw ?? [])
    .filter(({ exposure, expected }) => within(exposure) && allDrawable(expected) && expected >= 0)
    .sort((a, b) => a.exposure - b.exposure);
  return { totalExposure, steps, band, powerLaw, failures: last.count };
}

/**
 * Scales, curves and labels of the chart in drawing units: the observed steps, the straight line from
 * nothing to all failures that a constant rate would give, its band, and the power-law curve. Null when
 * nothing was watched or nothing failed.
 */
export function layoutCumulativeFailures(data: CumulativeFailuresData, size: ChartSize) {
  const usable = usableCumulativeFailures(data);
  if (usable === null) return null;
  const { totalExposure, steps, band, powerLaw, failures } = usable;

  const top = Math.max(
    failures,
    ...band.map(({ high }) => high),
    ...powerLaw.map(({ expected }) => Math.min(expected, 2 * failures)),
  );
  const yTicks = scaleLinear<number>({ domain: [0, top * 1.04], range: [1, 0] })
    .ticks(4)
    .filter(Number.isInteger);
  const left = axisRoom(yTicks.map(formatCount));
  const frame = plotFrame(size, size === 'wide' ? 300 : 290, { top: 30, right: 12, bottom: 42, left });
  const { plot } = frame;
  const xScale = scaleLinear<number>({ domain: [0, totalExposure], range: [plot.x, plot.x + plot.width] });
  const yScale = scaleLinear<number>({ domain: [0, top * 1.04], range: [plot.y + plot.height, plot.y] });

  const at = (exposure: number, count: number): Point => ({
    x: xScale(exposure),
    y: yScale(Math.min(count, top)),
  });
  const observed = thinPoints([
    at(0, 0),
    ...steps.map(({ exposure, count }) => at(exposure, count)),
    at(totalExposure, failures),
  ]);
  const constantRate = [at(0, 0), at(totalExposure, failures)];
  const upper = thinPoints(band.map(({ exposure, high }) => at(exposure, high)));
  const lower = thinPoints(band.map(({ exposure, low }) => at(exposure, low)));
  const power = thinPoints(powerLaw.map(({ exposure, expected }) => at(exposure, expected)));

  const stairs = observed.flatMap((point, index) => {
    const before = observed[index - 1];
    return before === undefined ? [point] : [{ x: point.x, y: before.y }, point];
  });
  const obstacles = [...sampled(stairs), ...sampled(constantRate), ...sampled(power), ...sampled(upper, 12)];
  const requests = [
    {
      lines: ['observed'],
      bold: true,
      colour: 'var(--ink)',
      about: observed[Math.round(0.6 * (observed.length - 1))] ?? at(0, 0),
      spots: spotsAlong(observed),
    },
    {
      lines: size === 'wide' ? ['if the rate were constant'] : ['if constant'],
      colour: 'var(--slate)',
      about: { x: xScale(totalExposure * 0.6), y: yScale(failures * 0.6) },
      spots: spotsAlong(sampled(constantRate)),
    },
    ...(power.length > 1
      ? [
          {
            lines: ['fitted power law'],
            colour: 'var(--rust)',
            about: power[Math.round(0.5 * (power.length - 1))] ?? at(0, 0),
            spots: spotsAlong(power),
          },
        ]
      : []),
    ...(band.length > 1
      ? [
          {
            lines: ['90\u202f% band'],
            colour: 'var(--slate)',
            about: lower[Math.round(0.7 * (lower.length - 1))] ?? at(0, 0),
            spots: [...spotsAlong(lower, 'below'), ...spotsAlong(upper, 'above')],
          },
        ]
      : []),
  ];
  const labels: readonly PlacedLabel[] = placeLabels(requests, plot, obstacles);

  return {
    frame,
    xScale,
    yScale,
    xTicks: fittingTicks(xScale, plot.width, (value) => formatTrimmed(value)),
    yTicks: { values: yTicks, format: formatCount },
    observed,
    stairs,
    constantRate,
    upper,
    lower,
    power,
    labels,
  };
}
