import { scaleLinear } from '@visx/scale';

import { formatCount, formatPercent } from '~/format/number';
import type { Verdict } from '~/advice/verdict';
import { VERDICT_COLOUR } from '~/components/verdict';
import { placeLabels, type LabelRequest } from './label-placement';
import { FONT_SIZE, plotFrame, tenth, textWidth, type ChartSize, type Point, type Rect } from './plot-frame';

/** So many failures can be read one by one in a table. */
export const mostMarksListed = 60;

export interface AgeRankMark {
  /** Share of its peers that were younger at that moment, 0…1. */
  readonly share: number;
  /** How much the failure tells, above 0; all alike when left out. Paler marks tell less. */
  readonly weight?: number;
  /** What and when, for the table. */
  readonly label: string;
}

export interface AgeRankData {
  readonly marks: readonly AgeRankMark[];
  readonly meanShare: number;
  /** Interval of the average share, if there is one. */
  readonly meanInterval?: readonly [low: number, high: number];
  readonly verdict: Verdict;
}

/** One drawn mark; the last of a stack may stand for less than a whole one where a mark is several failures. */
export interface DrawnMark extends Rect {
  readonly opacity: number;
}

export type AgeRankLayout = NonNullable<ReturnType<typeof layoutAgeRank>>;

interface MarkSize {
  readonly bins: number;
  readonly height: number;
  readonly pitch: number;
}

/** From roomy to tight: places along the strip, height of a mark, distance from one to the next. */
const MARK_SIZES: Record<ChartSize, readonly MarkSize[]> = {
  wide: [
    { bins: 40, height: 7, pitch: 9.5 },
    { bins: 50, height: 5, pitch: 7 },
    { bins: 80, height: 3.4, pitch: 4.6 },
    { bins: 120, height: 2.2, pitch: 3 },
  ],
  narrow: [
    { bins: 25, height: 7, pitch: 9.5 },
    { bins: 32, height: 5, pitch: 7 },
    { bins: 50, height: 3.4, pitch: 4.6 },
    { bins: 75, height: 2.2, pitch: 3 },
  ],
};

/** Tallest stack and least room above the baseline, in drawing units. */
const MOST_HEIGHT = 150;
const LEAST_HEIGHT = 44;

export function usableMarks(marks: readonly AgeRankMark[]): AgeRankMark[] {
  return marks.filter(
    ({ share, weight }) => share >= 0 && share <= 1 && (weight === undefined || weight > 0),
  );
}

/**
 * The strip in drawing units: marks stacked at their share, the level the stacks would have if age did not
 * matter, the average with its interval. Marks shrink as failures grow many; when even the smallest would
 * tower, one mark stands for `failuresPerMark` failures. Null without a failure that tells anything.
 */
export function layoutAgeRank(data: AgeRankData, size: ChartSize) {
  const marks = usableMarks(data.marks);
  if (marks.length === 0) return null;

  const sizes = MARK_SIZES[size];
  const fitting = sizes.find(({ bins, pitch }) => tallest(marks, bins) * pitch <= MOST_HEIGHT);
  const markSize = fitting ?? (sizes[0] as MarkSize);
  const { bins, height, pitch } = markSize;
  const failuresPerMark = Math.max(1, Math.ceil((tallest(marks, bins) * pitch) / MOST_HEIGHT));

  const stackHeight = Math.max(LEAST_HEIGHT, (tallest(marks, bins) / failuresPerMark) * pitch) + 2;
  const top = 30;
  const frame = plotFrame(size, Math.ceil(top + stackHeight + 56), { top, right: 8, bottom: 56, left: 8 });
  const { plot } = frame;
  const baseline = plot.y + plot.height;
  const xScale = scaleLinear<number>({ domain: [0, 1], range: [plot.x, plot.x + plot.width] });
  const binWidth = plot.width / bins;

  const drawn = stacks(marks, bins).flatMap((stack, bin) =>
    drawStack(stack, failuresPerMark, {
      x: plot.x + bin * binWidth,
      width: binWidth,
      baseline,
      height,
      pitch,
    }),
  );
  const levelY = tenth(baseline - (marks.length / bins / failuresPerMark) * pitch);

  const mean = meanMarker(data, baseline, xScale);
  const colour = VERDICT_COLOUR[data.verdict];
  return {
    frame,
    xScale,
    baseline,
    drawn,
    failuresPerMark,
    levelY,
    colour,
    mean,
    axisLabels: axisLabels(size, frame.plot, baseline),
    labels: [
      ...stripLabels(size, plot, levelY, drawn, failuresPerMark),
      ...(mean === null ? [] : meanLabel(mean, plot, baseline, colour, data.meanShare)),
    ],
  };
}

function stacks(marks: readonly AgeRankMark[], bins: number): AgeRankMark[][] {
  const out: AgeRankMark[][] = Array.from({ length: bins }, () => []);
  for (const mark of marks) out[Math.min(bins - 1, Math.floor(mark.share * bins))]?.push(mark);
  return out;
}

function tallest(marks: readonly AgeRankMark[], bins: number): number {
  return stacks(marks, bins).reduce((most, stack) => Math.max(most, stack.length), 0);
}

interface StackPlace {
  readonly x: number;
  readonly width: number;
  readonly baseline: number;
  readonly height: number;
  readonly pitch: number;
}

function drawStack(stack: readonly AgeRankMark[], perMark: number, place: StackPlace): DrawnMark[] {
  const gap = Math.min(2, place.width * 0.22);
  const byWeight = [...stack].sort((a, b) => (b.weight ?? 1) - (a.weight ?? 1));
  return Array.from({ length: Math.ceil(stack.length / perMark) }, (_, level) => {
    const held = byWeight.slice(level * perMark, (level + 1) * perMark);
    const height = Math.max(0.8, (place.height * held.length) / perMark);
    return {
      x: tenth(place.x + gap / 2),
      y: tenth(place.baseline - 1.5 - level * place.pitch - height),
      width: tenth(place.width - gap),
      height: tenth(height),
      opacity: perMark > 1 ? 1 : 0.45 + 0.55 * Math.min(1, held[0]?.weight ?? 1),
    };
  });
}

function meanMarker(data: AgeRankData, baseline: number, xScale: (share: number) => number) {
  const { meanShare, meanInterval } = data;
  if (!(meanShare >= 0 && meanShare <= 1)) return null;
  const inStrip = (share: number) => tenth(xScale(Math.min(1, Math.max(0, share))));
  const interval = meanInterval?.every(Number.isFinite) ? meanInterval : undefined;
  return {
    x: inStrip(meanShare),
    y: baseline + 7,
    low: interval === undefined ? null : inStrip(Math.min(...interval)),
    high: interval === undefined ? null : inStrip(Math.max(...interval)),
  };
}

function meanLabel(
  mean: { x: number; y: number },
  plot: Rect,
  baseline: number,
  colour: string,
  meanShare: number,
) {
  const text = `on average ${formatPercent(meanShare)}`;
  const half = textWidth(text, true) / 2;
  const x = Math.min(Math.max(mean.x, plot.x + half), plot.x + plot.width - half);
  const y = baseline + FONT_SIZE + 14;
  const row = { x: plot.x, y: y - FONT_SIZE, width: plot.width, height: FONT_SIZE * 1.6 };
  const request: LabelRequest = {
    lines: [text],
    bold: true,
    colour,
    about: mean,
    spots: [{ x, y, anchor: 'middle' }],
  };
  return placeLabels([request], row, []);
}

/** Names the level of "age does not matter", and what one mark is, where the fewest marks are in the way. */
function stripLabels(
  size: ChartSize,
  plot: Rect,
  levelY: number,
  drawn: readonly DrawnMark[],
  failuresPerMark: number,
) {
  const obstacles = drawn.flatMap(({ x, y, width, height }): Point[] => [
    { x, y },
    { x: x + width / 2, y: y + height / 2 },
    { x: x + width, y: y + height },
  ]);
  const right = plot.x + plot.width;
  const about = { x: plot.x, y: levelY };
  const level: LabelRequest = {
    lines: [
      size === 'wide'
        ? 'they would lie level with this if age did not matter'
        : 'level, if age did not matter',
    ],
    colour: 'var(--grey)',
    about,
    spots: [levelY - 6, levelY - 20, levelY - 40, plot.y - 10].flatMap((y) => [
      { x: plot.x, y, anchor: 'start' as const },
      { x: right, y, anchor: 'end' as const },
    ]),
  };
  const unit: LabelRequest = {
    lines: [`a whole mark is ${formatCount(failuresPerMark)} failures`],
    colour: 'var(--ink)',
    about,
    spots: [
      { x: plot.x, y: plot.y - 12, anchor: 'start' },
      { x: right, y: plot.y - 12, anchor: 'end' },
    ],
  };
  const bounds = { x: plot.x, y: 2, width: plot.width, height: plot.y + plot.height - 2 };
  return placeLabels(failuresPerMark > 1 ? [unit, level] : [level], bounds, obstacles);
}

function axisLabels(size: ChartSize, plot: Rect, baseline: number) {
  const y = baseline + 2 * FONT_SIZE + 20;
  const middle = size === 'wide' ? 'half its peers younger' : 'half younger';
  return [
    { text: 'youngest', x: plot.x, y, anchor: 'start' as const },
    { text: middle, x: plot.x + plot.width / 2, y, anchor: 'middle' as const },
    { text: 'oldest', x: plot.x + plot.width, y, anchor: 'end' as const },
  ];
}
