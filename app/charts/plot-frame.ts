/** A chart is drawn for a desk column or for a phone's width, never shrunk from one to the other. */
export type ChartSize = 'wide' | 'narrow';

/** Type size in drawing units, in both drawings. */
export const FONT_SIZE = 14;

const WIDTH: Record<ChartSize, number> = { wide: 640, narrow: 320 };

export interface Margins {
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
  readonly left: number;
}

export interface Rect {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export interface Point {
  readonly x: number;
  readonly y: number;
}

export interface PlotFrame {
  readonly size: ChartSize;
  readonly width: number;
  readonly height: number;
  /** Where the data are drawn, inside the margins. */
  readonly plot: Rect;
}

/** A drawing of the given height with its margins taken off. */
export function plotFrame(size: ChartSize, height: number, margins: Margins): PlotFrame {
  const width = WIDTH[size];
  const plot = {
    x: margins.left,
    y: margins.top,
    width: width - margins.left - margins.right,
    height: height - margins.top - margins.bottom,
  };
  return { size, width, height, plot };
}

/** To a tenth of a unit: finer cannot be seen and makes the page heavy. */
export function tenth(value: number): number {
  return Math.round(value * 10) / 10;
}

const LARGEST = 1e200;
const SMALLEST = 1e-200;

/** Whether scales can be computed from these values without running over: finite, and not absurdly large. */
export function allDrawable(...values: readonly number[]): boolean {
  return values.every((value) => Math.abs(value) < LARGEST);
}

/** Whether an axis can run from 0 to this value. */
export function isExtent(value: number): boolean {
  return value > SMALLEST && value < LARGEST;
}

/** Room for an axis's labels: the widest of them and a gap. */
export function axisRoom(labels: readonly string[]): number {
  return Math.ceil(Math.max(0, ...labels.map((label) => textWidth(label)))) + 10;
}

/** At most one value a tenth of a unit along x: the last one wins, which leaves a step curve as it is. */
export function thinPoints(points: readonly Point[]): Point[] {
  const kept: Point[] = [];
  for (const { x, y } of points) {
    const point = { x: tenth(x), y: tenth(y) };
    if (kept.length > 1 && kept.at(-1)?.x === point.x) kept.pop();
    kept.push(point);
  }
  return kept;
}

/**
 * Width of a text in Atkinson Hyperlegible in drawing units, from the advance widths of groups of
 * letters, rounded up: labels are placed on the server, where nothing can be measured.
 */
export function textWidth(text: string, bold = false, fontSize = FONT_SIZE): number {
  let ems = 0;
  for (const letter of text) ems += advance(letter);
  return ems * fontSize * (bold ? 1.06 : 1);
}

function advance(letter: string): number {
  if (/[ijl|.,:;'’!\u202f ]/.test(letter)) return 0.31;
  if (/[frt()\-/]/.test(letter)) return 0.4;
  if (/[mwMW%@]/.test(letter)) return 0.88;
  if (/[A-Z]/.test(letter)) return 0.68;
  if (/[0-9£€$]/.test(letter)) return 0.63;
  return 0.57;
}
