import { AxisBottom, AxisLeft } from '@visx/axis';

import type { Ticks } from './fitting-ticks';
import { FONT_SIZE, tenth, textWidth, type PlotFrame } from './plot-frame';

/** What the axes need of a linear scale. */
type LinearScale = Parameters<typeof AxisBottom>[0]['scale'] & ((value: number) => number);

interface AxisProps {
  frame: PlotFrame;
  scale: LinearScale;
  ticks: Ticks;
  /** What the axis measures; stands at its end. */
  label?: string;
}

/** The axis along the bottom of the plot, its label at the end below the figures. */
export function XAxis({ frame, scale, ticks, label }: AxisProps) {
  const { x, y, width, height } = frame.plot;
  return (
    <>
      <AxisBottom
        top={y + height}
        scale={scale}
        tickValues={[...ticks.values]}
        tickLength={4}
        hideAxisLine
        stroke="var(--ink)"
        tickStroke="var(--ink)"
        tickFormat={(value) => ticks.format(Number(value))}
        tickComponent={({ formattedValue = '', x: tickX }) => (
          <text
            x={insideDrawing(tickX, formattedValue, frame.width)}
            y={FONT_SIZE + 5}
            textAnchor="middle"
            fontSize={FONT_SIZE}
            fill="var(--ink)"
          >
            {formattedValue}
          </text>
        )}
      />
      <line x1={x} x2={x + width} y1={y + height} y2={y + height} stroke="var(--ink)" />
      {label !== undefined && (
        <text
          x={x + width}
          y={y + height + 2 * FONT_SIZE + 10}
          textAnchor="end"
          fontSize={FONT_SIZE}
          fill="var(--grey)"
        >
          {label}
        </text>
      )}
    </>
  );
}

/** The figures along the left of the plot, with hairlines across it; the label stands above the plot. */
export function YAxis({ frame, scale, ticks, label }: AxisProps) {
  const { x, y, width } = frame.plot;
  return (
    <>
      {ticks.values.map((value) => (
        <line
          key={value}
          x1={x}
          x2={x + width}
          y1={tenth(scale(value))}
          y2={tenth(scale(value))}
          stroke="var(--hair)"
          strokeWidth="0.75"
        />
      ))}
      <AxisLeft
        left={x}
        scale={scale}
        tickValues={[...ticks.values]}
        tickLength={0}
        hideAxisLine
        hideTicks
        tickFormat={(value) => ticks.format(Number(value))}
        tickComponent={({ formattedValue, y: tickY }) => (
          <text
            x={-7}
            y={tenth(tickY + FONT_SIZE * 0.34)}
            textAnchor="end"
            fontSize={FONT_SIZE}
            fill="var(--ink)"
          >
            {formattedValue}
          </text>
        )}
      />
      {label !== undefined && (
        <text x={0} y={y - FONT_SIZE} textAnchor="start" fontSize={FONT_SIZE} fill="var(--grey)">
          {label}
        </text>
      )}
    </>
  );
}

/** A centred label near an edge is moved in so far that none of it is cut. */
function insideDrawing(x: number, text: string, width: number): number {
  const half = textWidth(text) / 2;
  return tenth(Math.min(Math.max(x, half), width - half));
}
