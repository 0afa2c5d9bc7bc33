import { Area, LinePath } from '@visx/shape';

import type { Point, Rect } from './plot-frame';

interface CurveProps {
  points: readonly Point[];
  colour: string;
  width?: number;
  dashes?: string;
}

/** A line through points. */
export function Curve({ points, colour, width = 2, dashes }: CurveProps) {
  if (points.length < 2) return null;
  return (
    <LinePath
      data={[...points]}
      x={({ x }) => x}
      y={({ y }) => y}
      stroke={colour}
      strokeWidth={width}
      strokeDasharray={dashes}
      strokeLinejoin="round"
    />
  );
}

interface BandProps {
  upper: readonly Point[];
  lower: readonly Point[];
  colour: string;
}

/** The shaded band between two curves at the same places along x. */
export function Band({ upper, lower, colour }: BandProps) {
  const pairs = upper.flatMap((point, index) => {
    const below = lower[index];
    return below === undefined ? [] : [{ x: point.x, high: point.y, low: below.y }];
  });
  if (pairs.length < 2) return null;
  return (
    <Area
      data={pairs}
      x={({ x }) => x}
      y0={({ low }) => low}
      y1={({ high }) => high}
      fill={colour}
      fillOpacity="0.14"
    />
  );
}

/** A hatched part of the plot: nothing is known there. */
export function Hatch({ rect, id }: { rect: Rect; id: string }) {
  return (
    <>
      <defs>
        <pattern id={id} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" y1="0" x2="0" y2="7" stroke="var(--hair)" strokeWidth="2" />
        </pattern>
      </defs>
      <rect x={rect.x} y={rect.y} width={rect.width} height={rect.height} fill={`url(#${id})`} />
    </>
  );
}
