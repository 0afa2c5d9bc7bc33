import type { Point } from './plot-frame';

/**
 * The part of a curve at or under `top`, in data units, with the places where it crosses put in. A curve
 * that leaves and comes back is joined along the top.
 */
export function cutAtTop(curve: readonly Point[], top: number): Point[] {
  return curve.flatMap((point, index) => {
    const before = curve[index - 1];
    const crosses = before !== undefined && before.y > top !== point.y > top;
    const share = crosses ? (top - before.y) / (point.y - before.y) : 0;
    const crossing = crosses ? [{ x: before.x + share * (point.x - before.x), y: top }] : [];
    return point.y > top ? crossing : [...crossing, point];
  });
}
