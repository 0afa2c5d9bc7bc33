import { scaleLinear } from '@visx/scale';

import { formatTrimmed } from '~/format/number';
import { cutAtTop } from './cut-at-top';
import { fittingTicks } from './fitting-ticks';
import { placeLabels, sampled, spotsAlong, type LabelRequest } from './label-placement';
import {
  allDrawable,
  isExtent,
  axisRoom,
  plotFrame,
  tenth,
  textWidth,
  thinPoints,
  type ChartSize,
  type Point,
} from './plot-frame';

export interface HazardBand {
  readonly from: number;
  readonly to: number;
  /** Failures per unit of exposure at these ages, with its 90 % interval. */
  readonly rate: number;
  readonly low: number;
  readonly high: number;
  readonly failures: number;
  readonly exposure: number;
}

export interface HazardByAgeData {
  readonly bands: readonly HazardBand[];
  readonly curve: readonly { readonly age: number; readonly rate: number }[];
  readonly curveBand?: readonly { readonly age: number; readonly low: number; readonly high: number }[];
  /** Age from which nothing is known. */
  readonly notSeenFrom?: number;
}

export type HazardByAgeLayout = NonNullable<ReturnType<typeof layoutHazardByAge>>;

/** The bands and curve a chart can be drawn from, in order of age; null when there are none. */
export function usableHazard(data: HazardByAgeData) {
  const bands = data.bands
    .filter(
      ({ from, to, rate, low, high }) => allDrawable(from, to, rate, low, high) && to > from && from >= 0,
    )
    .filter(({ rate, low, high }) => low >= 0 && rate >= low && high >= rate)
    .sort((a, b) => a.from - b.from);
  const curve = data.curve
    .filter(({ age, rate }) => allDrawable(age, rate) && age >= 0 && rate >= 0)
    .sort((a, b) => a.age - b.age);
  const curveBand = (data.curveBand ?? [])
    .filter(({ age, low, high }) => allDrawable(age, low, high) && age >= 0 && low >= 0 && high >= low)
    .sort((a, b) => a.age - b.age);
  const lastAge = Math.max(0, ...bands.map(({ to }) => to), curve.at(-1)?.age ?? 0);
  const lastRate = Math.max(0, ...bands.map(({ high }) => high), ...curve.map(({ rate }) => rate));
  if ((bands.length === 0 && curve.length < 2) || !isExtent(lastAge) || !isExtent(lastRate)) return null;
  const notSeenFrom =
    data.notSeenFrom !== undefined && isExtent(data.notSeenFrom) ? data.notSeenFrom : undefined;
  return {
    bands,
    curve,
    curveBand: curveBand.filter(({ age }) => age <= lastAge),
    lastAge,
    notSeenFrom,
  };
}

const NOT_SEEN = 'not seen';

/**
 * Scales, bands with whiskers, fitted curve and the part nothing is known about, in drawing units. The
 * scale follows what was seen: a whisker or a curve that would dwarf the rates is cut at the top and marked
 * so. Null when there is nothing to draw.
 */
export function layoutHazardByAge(data: HazardByAgeData, size: ChartSize) {
  const usable = usableHazard(data);
  if (usable === null) return null;
  const { bands, curve, curveBand, lastAge, notSeenFrom } = usable;

  const top = topRate(usable);
  const probe = scaleLinear<number>({ domain: [0, top], range: [1, 0] });
  const yTicks = probe.ticks(4);
  const left = axisRoom(yTicks.map((value) => formatTrimmed(value)));
  const frame = plotFrame(size, 280, { top: 40, right: 12, bottom: 42, left });
  const { plot } = frame;
  const right = plot.x + plot.width;
  const room = (textWidth(NOT_SEEN) + 16) / plot.width;
  const end = notSeenFrom === undefined ? lastAge : Math.max(lastAge, notSeenFrom / (1 - room));
  const xScale = scaleLinear<number>({ domain: [0, end], range: [plot.x, right] });
  const yScale = scaleLinear<number>({ domain: [0, top], range: [plot.y + plot.height, plot.y] });
  const at = (age: number, rate: number): Point => ({
    x: tenth(xScale(age)),
    y: tenth(yScale(Math.min(rate, top))),
  });

  const steps = bands.map((band) => ({
    x1: tenth(xScale(band.from)),
    x2: tenth(xScale(band.to)),
    middle: tenth((xScale(band.from) + xScale(band.to)) / 2),
    rateY: at(0, band.rate).y,
    lowY: at(0, band.low).y,
    highY: at(0, band.high).y,
    isCut: band.high > top,
  }));
  const fitted = thinPoints(
    cutAtTop(
      curve.map(({ age, rate }) => ({ x: age, y: rate })),
      top,
    ).map(({ x, y }) => at(x, y)),
  );
  const limitX = notSeenFrom === undefined ? Infinity : xScale(notSeenFrom);
  const beyond = fitted.filter(({ x }, index) => x > limitX || (fitted[index + 1]?.x ?? 0) > limitX);
  const upper = thinPoints(curveBand.map(({ age, high }) => at(age, high)));
  const lower = thinPoints(curveBand.map(({ age, low }) => at(age, low)));
  const hatch =
    notSeenFrom === undefined
      ? null
      : {
          x: tenth(xScale(notSeenFrom)),
          y: plot.y,
          width: tenth(right - xScale(notSeenFrom)),
          height: plot.height,
        };

  const obstacles = [
    ...sampled(fitted),
    ...steps.flatMap(({ x1, x2, middle, rateY, lowY, highY }) => [
      ...sampled([
        { x: x1, y: rateY },
        { x: x2, y: rateY },
      ]),
      ...sampled([
        { x: middle, y: lowY },
        { x: middle, y: highY },
      ]),
    ]),
  ];
  const requests: LabelRequest[] = [];
  if (hatch !== null) {
    const spot = { x: hatch.x + hatch.width / 2, y: plot.y + 18 };
    requests.push({
      lines: [NOT_SEEN],
      colour: 'var(--grey)',
      about: spot,
      spots: [spot, { ...spot, y: spot.y + 30 }, { ...spot, y: spot.y + 60 }].map((place) => ({
        ...place,
        anchor: 'middle',
      })),
    });
  }
  const widest = [...steps].sort((a, b) => b.x2 - b.x1 - (a.x2 - a.x1))[0];
  if (fitted.length > 1) {
    requests.push({
      lines: ['fitted curve'],
      bold: true,
      colour: 'var(--rust)',
      about: fitted[Math.round(0.6 * (fitted.length - 1))] as Point,
      spots: spotsAlong(fitted),
    });
  }
  if (widest !== undefined) {
    requests.push({
      lines: ['seen, with 90\u202f% interval'],
      colour: 'var(--ink)',
      about: { x: widest.middle, y: widest.highY },
      spots: steps.flatMap(({ x1, x2, middle, rateY, highY, lowY }) => [
        { x: middle, y: highY - 6, anchor: 'middle' as const },
        { x: x1, y: highY - 6, anchor: 'start' as const },
        { x: x2 + 6, y: rateY + 5, anchor: 'start' as const },
        { x: middle + 6, y: lowY + 4, anchor: 'start' as const },
      ]),
    });
  }

  return {
    frame,
    xScale,
    yScale,
    xTicks: fittingTicks(xScale, plot.width, (value) => formatTrimmed(value)),
    yTicks: { values: yTicks, format: (value: number) => formatTrimmed(value) },
    steps,
    fitted: fitted.filter(({ x }) => x <= limitX),
    beyond,
    upper,
    lower,
    hatch,
    labels: placeLabels(requests, plot, obstacles),
  };
}

/** High enough for every rate and most intervals, but never so high that the rates lie on the floor. */
function topRate({ bands, curve }: NonNullable<ReturnType<typeof usableHazard>>): number {
  const rates = Math.max(0, ...bands.map(({ rate }) => rate));
  const highs = Math.max(0, ...bands.map(({ high }) => high));
  if (rates > 0) return 1.08 * Math.max(rates, Math.min(highs, 2.6 * rates));
  const sorted = curve.map(({ rate }) => rate).sort((a, b) => a - b);
  const upperQuarter = sorted[Math.floor(0.75 * (sorted.length - 1))] ?? 0;
  return 1.08 * Math.max(highs, upperQuarter * 2 || (sorted.at(-1) ?? 0)) || 1;
}
