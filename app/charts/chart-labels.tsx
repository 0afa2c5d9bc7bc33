import { LINE_HEIGHT, type PlacedLabel } from './label-placement';
import { FONT_SIZE } from './plot-frame';

/** Labels where they were placed, on a rim of paper so that they read over lines. */
export function ChartLabels({ labels }: { labels: readonly PlacedLabel[] }) {
  return (
    <>
      {labels.map((label) => (
        <g key={label.lines.join(' ')}>
          {label.leader !== null && (
            <line
              x1={label.leader.from.x}
              y1={label.leader.from.y}
              x2={label.leader.to.x}
              y2={label.leader.to.y}
              stroke={label.colour}
              strokeWidth="0.8"
            />
          )}
          <text
            textAnchor={label.anchor}
            fontSize={FONT_SIZE}
            fill={label.colour}
            stroke="var(--paper)"
            strokeWidth="4"
            strokeLinejoin="round"
            paintOrder="stroke"
          >
            {label.lines.map((line, index) => (
              <tspan
                key={index}
                x={label.x}
                y={label.y + index * LINE_HEIGHT}
                fontWeight={label.bold && index === 0 ? 700 : undefined}
              >
                {line}
              </tspan>
            ))}
          </text>
        </g>
      ))}
    </>
  );
}
