import { scaleLinear } from '@visx/scale';

import { formatQuantity, formatTrimmed } from '~/format/number';
import { formatMoneyShort } from '~/format/money';
import { cutAtTop } from './cut-at-top';
import { fittingTicks } from './fitting-ticks';
import { placeLabels, sampled, spotsAlong, type LabelRequest, type LabelSpot } from './label-placement';
import {
  allDrawable,
  isExtent,
  axisRoom,
  FONT_SIZE,
  plotFrame,
  tenth,
  thinPoints,
  type ChartSize,
  type Point,
} from './plot-frame';

export interface CostPoint {
  /** Interval between replacements, in the chart's unit. */
  readonly interval: number;
  /** Cost a year in integer minor units of the currency. */
  readonly cost: number;
}

export interface CostByIntervalData {
  /** Cost a year by interval, with the range of what is not known. */
  readonly curve: readonly (CostPoint & { readonly low: number; readonly high: number })[];
  readonly runToFailure: { readonly cost: number; readonly low?: number; readonly high?: number };
  readonly today?: CostPoint;
  readonly best?: CostPoint;
  /** An interval somebody tries out. */
  readonly tried?: CostPoint;
  /** Longest interval the records can speak of. */
  readonly supportedUntil?: number;
  /** ISO 4217. */
  readonly currency: string;
  /** Unit of the intervals, in the singular: "month". */
  readonly intervalUnit: string;
}

export type CostByIntervalLayout = NonNullable<ReturnType<typeof layoutCostByInterval>>;

const isPoint = (point: CostPoint | undefined): point is CostPoint =>
  point !== undefined && allDrawable(point.interval, point.cost) && point.interval >= 0 && point.cost >= 0;

/** What can be drawn, in order of interval; null with less than two different intervals or no cost at all. */
export function usableCosts(data: CostByIntervalData) {
  const curve = data.curve
    .filter((point) => isPoint(point) && allDrawable(point.low, point.high) && point.low >= 0)
    .filter(({ cost, low, high }) => low <= cost && cost <= high)
    .sort((a, b) => a.interval - b.interval);
  const first = curve[0];
  const last = curve.at(-1);
  if (first === undefined || last === undefined) return null;
  if (!curve.some(({ cost }) => isExtent(cost)) || !isExtent(last.interval - first.interval)) return null;
  const { cost, low, high } = data.runToFailure;
  const hasRange =
    low !== undefined && high !== undefined && allDrawable(low, high) && low >= 0 && high >= low;
  const runToFailure =
    allDrawable(cost) && cost >= 0 ? { cost, range: hasRange ? { low, high } : null } : null;
  return {
    curve,
    first,
    last,
    runToFailure,
    today: isPoint(data.today) ? data.today : undefined,
    best: isPoint(data.best) ? data.best : undefined,
    tried: isPoint(data.tried) ? data.tried : undefined,
  };
}

/**
 * Scales, the cost curve with its band, run to failure, today's interval and the best one, and the part
 * beyond what the records support, in drawing units. Short intervals can cost without limit: the scale
 * stops a little above run to failure and today, and the curve is cut there.
 */
export function layoutCostByInterval(data: CostByIntervalData, size: ChartSize) {
  const usable = usableCosts(data);
  if (usable === null) return null;
  const { curve, first, last, runToFailure, today, best, tried } = usable;

  const top = topCost(usable);
  const money = (value: number) => formatMoneyShort(value, data.currency);
  const yTicks = scaleLinear<number>({ domain: [0, top], range: [1, 0] }).ticks(4);
  const left = axisRoom(yTicks.map(money));
  const frame = plotFrame(size, 300, { top: 36, right: 12, bottom: 42, left });
  const { plot } = frame;
  const right = plot.x + plot.width;
  const marked = [today, best, tried].filter((point) => point !== undefined);
  const from = Math.min(first.interval, ...marked.map(({ interval }) => interval));
  const to = Math.max(last.interval, ...marked.map(({ interval }) => interval));
  const xScale = scaleLinear<number>({ domain: [from, to], range: [plot.x, right] });
  const yScale = scaleLinear<number>({ domain: [0, top], range: [plot.y + plot.height, plot.y] });
  const at = (interval: number, cost: number): Point => ({
    x: tenth(xScale(interval)),
    y: tenth(yScale(Math.min(cost, top))),
  });

  const line = thinPoints(
    cutAtTop(
      curve.map(({ interval, cost }) => ({ x: interval, y: cost })),
      top,
    ).map(({ x, y }) => at(x, y)),
  );
  const upper = thinPoints(curve.map(({ interval, high }) => at(interval, high)));
  const lower = thinPoints(curve.map(({ interval, low }) => at(interval, low)));
  const failureLine =
    runToFailure === null
      ? null
      : {
          y: at(from, runToFailure.cost).y,
          low: runToFailure.range && at(from, runToFailure.range.low).y,
          high: runToFailure.range && at(from, runToFailure.range.high).y,
        };
  const limit = data.supportedUntil;
  const hatch =
    limit !== undefined && limit < to
      ? {
          x: tenth(xScale(Math.max(limit, from))),
          y: plot.y,
          width: tenth(right - xScale(Math.max(limit, from))),
          height: plot.height,
        }
      : null;

  const markers = markersOf(today, best, tried).map((marker) => ({
    ...marker,
    ...at(marker.interval, marker.cost),
  }));
  const requests: LabelRequest[] = markers.map(({ word, interval, cost, x, y }) => ({
    lines: [
      `${word}, ${formatQuantity(interval, data.intervalUnit)}`,
      `${formatMoneyShort(cost, data.currency)} a year`,
    ],
    bold: true,
    colour: 'var(--ink)',
    about: { x, y },
    spots: spotsAround(x, y, plot.x, right),
  }));
  if (failureLine !== null && runToFailure !== null) {
    requests.push({
      lines: [`run to failure ${money(runToFailure.cost)}`],
      colour: 'var(--slate)',
      about: { x: right, y: failureLine.y },
      spots: [
        { x: right, y: failureLine.y - 6, anchor: 'end' },
        { x: right, y: failureLine.y + FONT_SIZE + 3, anchor: 'end' },
        { x: plot.x + 6, y: failureLine.y - 6, anchor: 'start' },
        { x: plot.x + plot.width / 2, y: failureLine.y - 6, anchor: 'middle' },
      ],
    });
  }
  if (hatch !== null) {
    const middle = hatch.x + hatch.width / 2;
    requests.push({
      lines: ['beyond', 'the records'],
      colour: 'var(--grey)',
      about: { x: middle, y: plot.y + plot.height - 40 },
      spots: [plot.y + plot.height - 26, plot.y + 16, plot.y + plot.height / 2].flatMap((y): LabelSpot[] => [
        { x: middle, y, anchor: 'middle' },
        { x: right, y, anchor: 'end' },
      ]),
    });
  }
  if (line.length > 1) {
    requests.push({
      lines: [size === 'wide' ? 'replaced by schedule' : 'by schedule'],
      colour: 'var(--rust)',
      about: line[Math.round(0.6 * (line.length - 1))] as Point,
      spots: spotsAlong(line),
    });
  }
  const obstacles = [
    ...sampled(line),
    ...markers.flatMap(({ x, y }) => [-6, 0, 6].map((dx) => ({ x: x + dx, y }))),
    ...(failureLine === null
      ? []
      : sampled([at(from, runToFailure?.cost ?? 0), at(to, runToFailure?.cost ?? 0)])),
  ];

  return {
    frame,
    xScale,
    yScale,
    xTicks: fittingTicks(xScale, plot.width, (value) => formatTrimmed(value)),
    yTicks: { values: yTicks, format: money },
    line,
    upper,
    lower,
    failureLine,
    hatch,
    markers,
    labels: placeLabels(requests, plot, obstacles),
  };
}

function topCost({
  curve,
  runToFailure,
  today,
  best,
  tried,
}: NonNullable<ReturnType<typeof usableCosts>>): number {
  const cheapest = Math.min(...curve.map(({ cost }) => cost));
  const dearest = Math.max(...curve.map(({ high }) => high));
  const marked = [runToFailure, today, best, tried].map((point) => point?.cost ?? 0);
  const shown = Math.max(...marked, 2 * cheapest);
  const withRange = Math.max(shown, Math.min(runToFailure?.range?.high ?? 0, 1.5 * shown));
  return 1.15 * Math.max(withRange, Math.min(dearest, 1.25 * withRange)) || 1;
}

/** Today, the best and the one tried; those of one interval as one. */
function markersOf(
  today: CostPoint | undefined,
  best: CostPoint | undefined,
  tried: CostPoint | undefined,
): (CostPoint & { word: string })[] {
  const markers: (CostPoint & { word: string })[] = [];
  const add = (word: string, point: CostPoint | undefined) => {
    if (point === undefined) return;
    const same = markers.find(({ interval }) => Math.abs(interval - point.interval) <= 0.01 * point.interval);
    if (same === undefined) markers.push({ word, ...point });
    else same.word = `${same.word} and ${word}`;
  };
  add('today', today);
  add('best', best);
  add('tried', tried);
  return markers;
}

function spotsAround(x: number, y: number, left: number, right: number): LabelSpot[] {
  const below = y + FONT_SIZE + 11;
  const above = y - FONT_SIZE * 1.2 - 12;
  return [below, above, below + 14, above - 14].flatMap((row): LabelSpot[] => [
    { x, y: row, anchor: 'middle' },
    { x: Math.max(left + 4, x - 8), y: row, anchor: 'start' },
    { x: Math.min(right - 2, x + 8), y: row, anchor: 'end' },
  ]);
}
