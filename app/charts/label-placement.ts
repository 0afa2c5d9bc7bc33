import { FONT_SIZE, tenth, textWidth, type Point, type Rect } from './plot-frame';

export type Anchor = 'start' | 'middle' | 'end';

/** Where a label's first baseline might go. */
export interface LabelSpot extends Point {
  readonly anchor: Anchor;
}

export interface LabelRequest {
  /** Lines under each other; the first may be bold. */
  readonly lines: readonly string[];
  readonly bold?: boolean;
  readonly colour: string;
  /** What the label speaks of; a thin line leads there when the label had to go elsewhere. */
  readonly about: Point;
  /** In order of preference. */
  readonly spots: readonly LabelSpot[];
}

export interface PlacedLabel extends LabelSpot {
  readonly lines: readonly string[];
  readonly bold: boolean;
  readonly colour: string;
  readonly box: Rect;
  readonly leader: { readonly from: Point; readonly to: Point } | null;
}

export const LINE_HEIGHT = FONT_SIZE * 1.2;

/**
 * Puts labels on a drawing so that none leaves `bounds` and none covers another: each takes, of its own
 * spots, the one that covers least of the curves (`obstacles`, points dense enough along them); where all
 * of its spots are taken it goes to the nearest free place of a grid, with a leader.
 */
export function placeLabels(
  requests: readonly LabelRequest[],
  bounds: Rect,
  obstacles: readonly Point[],
): PlacedLabel[] {
  const placed: PlacedLabel[] = [];
  const covered = onePerCell(obstacles);
  for (const request of requests) {
    const size = sizeOf(request);
    const isFree = (box: Rect) =>
      isInside(box, bounds) && !placed.some((other) => overlaps(box, grown(other.box, 3)));
    let best: { spot: LabelSpot; box: Rect; isOwn: boolean } | undefined;
    let bestCost = Infinity;
    const weigh = ({ spot, penalty, isOwn }: Option) => {
      if (penalty >= bestCost) return;
      const box = boxAt(spot, size);
      if (!isFree(box)) return;
      const cost = penalty + countCovered(grown(box, 2), covered, bestCost - penalty);
      if (cost < bestCost) [best, bestCost] = [{ spot, box, isOwn }, cost];
    };
    for (const [index, spot] of request.spots.entries()) weigh({ spot, penalty: index * 0.12, isOwn: true });
    // The grid is hundreds of places, and no place on it is cheaper than this.
    if (bestCost > leastGridPenalty) {
      for (const option of gridSpots(bounds, size, request.about)) weigh(option);
    }
    if (best !== undefined) placed.push(finished(request, best.spot, best.box, best.isOwn));
  }
  return placed;
}

/** Spots along a curve: above it, then below it, at some shares of its length. */
export function spotsAlong(points: readonly Point[], side: 'above' | 'below' | 'both' = 'both'): LabelSpot[] {
  if (points.length === 0) return [];
  return [0.6, 0.5, 0.7, 0.4, 0.8, 0.3, 0.9, 0.2, 0.97, 0.1].flatMap((share) => {
    const index = Math.round(share * (points.length - 1));
    const { x, y } = points[index] as Point;
    const rises = (points.at(-1)?.y ?? y) <= (points[0]?.y ?? y);
    const above: LabelSpot = { x: rises ? x - 5 : x + 5, y: y - 7, anchor: rises ? 'end' : 'start' };
    const below: LabelSpot = {
      x: rises ? x + 7 : x - 7,
      y: y + FONT_SIZE + 4,
      anchor: rises ? 'start' : 'end',
    };
    return side === 'above' ? [above] : side === 'below' ? [below] : [above, below];
  });
}

/** Points every few units along straight pieces, so that a label crossing a long piece is noticed. */
export function sampled(points: readonly Point[], step = 4): Point[] {
  const out: Point[] = [];
  for (const [index, to] of points.entries()) {
    const from = points[index - 1];
    if (from !== undefined) {
      const pieces = Math.min(400, Math.floor(Math.hypot(to.x - from.x, to.y - from.y) / step));
      for (let piece = 1; piece < pieces; piece += 1) {
        const share = piece / pieces;
        out.push({ x: from.x + share * (to.x - from.x), y: from.y + share * (to.y - from.y) });
      }
    }
    out.push(to);
  }
  return out;
}

interface Size {
  width: number;
  height: number;
}

function sizeOf({ lines, bold = false }: LabelRequest): Size {
  const widths = lines.map((line, index) => textWidth(line, bold && index === 0));
  return { width: Math.max(0, ...widths), height: lines.length * LINE_HEIGHT };
}

function boxAt({ x, y, anchor }: LabelSpot, { width, height }: Size): Rect {
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2;
  return { x: left, y: y - FONT_SIZE * 0.82, width, height };
}

interface Option {
  spot: LabelSpot;
  penalty: number;
  isOwn: boolean;
}

const leastGridPenalty = 3;

/** A coarse grid over the drawing, the places near what the label speaks of first. */
function gridSpots(bounds: Rect, size: Size, about: Point): Option[] {
  const spots: Option[] = [];
  for (let y = bounds.y + FONT_SIZE; y <= bounds.y + bounds.height; y += 9) {
    for (let x = bounds.x; x + size.width <= bounds.x + bounds.width; x += 12) {
      const distance = Math.hypot(x + size.width / 2 - about.x, y - about.y);
      spots.push({
        spot: { x, y, anchor: 'start' },
        penalty: leastGridPenalty + distance / 25,
        isOwn: false,
      });
    }
  }
  return spots.sort((a, b) => a.penalty - b.penalty);
}

function finished(request: LabelRequest, spot: LabelSpot, box: Rect, isOwn: boolean): PlacedLabel {
  const { about } = request;
  const from = {
    x: tenth(Math.min(Math.max(about.x, box.x), box.x + box.width)),
    y: tenth(Math.min(Math.max(about.y, box.y - 1), box.y + box.height + 1)),
  };
  const isFar = Math.hypot(from.x - about.x, from.y - about.y) > 14;
  return {
    x: tenth(spot.x),
    y: tenth(spot.y),
    anchor: spot.anchor,
    lines: request.lines,
    bold: request.bold ?? false,
    colour: request.colour,
    box,
    leader: !isOwn && isFar ? { from, to: { x: tenth(about.x), y: tenth(about.y) } } : null,
  };
}

export function overlaps(a: Rect, b: Rect): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}

export function isInside(inner: Rect, outer: Rect): boolean {
  const slack = 0.5;
  return (
    inner.x >= outer.x - slack &&
    inner.y >= outer.y - slack &&
    inner.x + inner.width <= outer.x + outer.width + slack &&
    inner.y + inner.height <= outer.y + outer.height + slack
  );
}

function contains(box: Rect, { x, y }: Point): boolean {
  return x >= box.x && x <= box.x + box.width && y >= box.y && y <= box.y + box.height;
}

/** One point a cell of 3 units, so that crowded curves count by what they cover and not by their points. */
function onePerCell(points: readonly Point[]): Point[] {
  const cells = new Map<number, Point>();
  for (const point of points) cells.set(Math.round(point.x / 3) * 4096 + Math.round(point.y / 3), point);
  return [...cells.values()];
}

/** How many points a box covers; the count stops at `enough`, beyond which the place is no good anyway. */
function countCovered(box: Rect, points: readonly Point[], enough: number): number {
  let covered = 0;
  for (const point of points) {
    if (contains(box, point)) covered += 1;
    if (covered >= enough) return covered;
  }
  return covered;
}

function grown(box: Rect, by: number): Rect {
  return { x: box.x - by, y: box.y - by, width: box.width + 2 * by, height: box.height + 2 * by };
}
