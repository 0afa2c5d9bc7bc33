import type { Timeline, TimelineKind } from '~/advice/timeline';
import { layoutTimeline, timelineNames, timelineSentence } from './position-timeline-layout';

interface PositionTimelineProps {
  timeline: Timeline;
  /** Drawing units; it is drawn at that width and scales with its place. */
  width?: number;
  /** Whether years are written under the line. */
  withYears?: boolean;
}

/** What happened at one place along a line of time; a screen reader hears it as a sentence. */
export function PositionTimeline({ timeline, width = 300, withYears = false }: PositionTimelineProps) {
  const layout = layoutTimeline(timeline, width);
  const sentence = timelineSentence(timeline);
  if (layout === null) return <span className="text-grey">not watched yet</span>;
  const { height, y, from, to, marks, years } = layout;
  const full = withYears ? height + 14 : height;
  return (
    <svg
      viewBox={`0 0 ${width} ${full}`}
      width={width}
      role="img"
      aria-label={sentence}
      className="block h-auto max-w-full"
    >
      <line x1={from} x2={to} y1={y} y2={y} stroke="var(--rule)" strokeWidth="1.5" />
      {years.map(({ x, year }) => (
        <g key={year}>
          <line x1={x} x2={x} y1={y - 9} y2={y + 9} stroke="var(--hair)" strokeWidth="1" />
          {withYears && (
            <text x={x} y={full - 2} textAnchor="middle" fontSize="12" fill="var(--grey)">
              {year}
            </text>
          )}
        </g>
      ))}
      {marks.map(({ x, kind }, index) => (
        <Mark key={index} x={x} y={y} kind={kind} />
      ))}
    </svg>
  );
}

function Mark({ x, y, kind }: { x: number; y: number; kind: TimelineKind }) {
  switch (kind) {
    case 'failure-renewed':
      return <circle cx={x} cy={y} r="5" fill="var(--rust)" />;
    case 'failure-patched':
      return <circle cx={x} cy={y} r="4.5" fill="var(--paper)" stroke="var(--rust)" strokeWidth="2" />;
    case 'outside':
      return (
        <path d={`M${x - 4} ${y - 4}l8 8M${x + 4} ${y - 4}l-8 8`} stroke="var(--grey)" strokeWidth="2" />
      );
    case 'renewal':
      return <path d={`M${x} ${y - 8}V${y + 8}`} stroke="var(--ink)" strokeWidth="2.4" />;
    case 'visit':
      return <path d={`M${x} ${y - 3}V${y + 3}`} stroke="var(--grey)" strokeWidth="1.2" />;
  }
}

/** What the marks mean, each beside its word. */
export function TimelineKey() {
  return (
    <ul className="flex flex-wrap gap-x-5 gap-y-1 text-[0.9rem]">
      {(Object.keys(timelineNames) as TimelineKind[]).map((kind) => (
        <li key={kind} className="inline-flex items-center gap-1.5">
          <svg viewBox="0 0 18 20" width="18" aria-hidden="true">
            <Mark x={9} y={10} kind={kind} />
          </svg>
          {timelineNames[kind]}
        </li>
      ))}
    </ul>
  );
}
