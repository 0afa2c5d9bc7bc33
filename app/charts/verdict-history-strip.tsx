import { formatCalendarDate } from '~/format/date';
import { formatCount, formatNoun } from '~/format/number';
import type { Verdict } from '~/advice/verdict';
import { VERDICT_COLOUR } from '~/components/verdict';
import { ChartAbsent, ChartFigure } from './chart-figure';
import { FONT_SIZE } from './plot-frame';
import { layoutVerdictHistory, type VerdictHistoryLayout, type VerdictRun } from './verdict-history-layout';

interface VerdictHistoryStripProps {
  /** The oldest first. */
  runs: readonly VerdictRun[];
  title?: string;
}

/** The verdict night after night, changes where they happened and with what brought them about. */
export function VerdictHistoryStrip({ runs, title = 'The verdict over time' }: VerdictHistoryStripProps) {
  if (runs.length === 0) return <ChartAbsent title={title} reason="No night has been assessed yet." />;
  return (
    <ChartFigure
      title={title}
      sentence={sentenceFor(runs)}
      table={{
        columns: ['Verdict', 'From', 'To', 'Nights', 'Failures behind it', 'What brought it about'],
        rows: runs.map(({ verdict, from, to, nights, n, why }) => [
          verdict,
          formatCalendarDate(from),
          formatCalendarDate(to),
          formatCount(nights),
          formatCount(n),
          why ?? '',
        ]),
      }}
      draw={(size) => {
        const layout = layoutVerdictHistory(runs, size);
        if (layout === null) return { width: 1, height: 1, content: null };
        return { width: layout.frame.width, height: layout.frame.height, content: <Strip layout={layout} /> };
      }}
    />
  );
}

/** The hazard curve of each verdict, 16 units high, from 0 to 32. */
const CURVE: Record<Verdict, string> = {
  'wear-out': 'M2 13C11 13 21 11 30 3',
  memoryless: 'M2 8H30',
  'early-life': 'M2 3C9 11 18 13 30 13',
  undecided: 'M2 8H30',
};

function Strip({ layout }: { layout: VerdictHistoryLayout }) {
  const { frame, stretches, dates } = layout;
  const { y, height } = frame.plot;
  return (
    <>
      {stretches.map(({ run, x, width, glyphX, word }) => {
        const colour = VERDICT_COLOUR[run.verdict];
        return (
          <g key={run.from}>
            <rect x={x} y={y} width={width} height={height} fill={colour} fillOpacity="0.14" />
            <line x1={x} x2={x} y1={y - 4} y2={y + height} stroke={colour} strokeWidth="1.5" />
            {glyphX !== null && (
              <path
                d={CURVE[run.verdict]}
                transform={`translate(${glyphX + 2} ${y - 1})`}
                fill="none"
                stroke={colour}
                strokeWidth="2.4"
                strokeDasharray={run.verdict === 'undecided' ? '5 4' : undefined}
              />
            )}
            {word !== null && (
              <text x={x} y={y - 9} fontSize={FONT_SIZE} fontWeight="700" fill={colour}>
                {word}
              </text>
            )}
          </g>
        );
      })}
      {dates.map(({ text, x, anchor }) => (
        <text
          key={anchor}
          x={x}
          y={y + height + 19}
          textAnchor={anchor}
          fontSize={FONT_SIZE}
          fill="var(--ink)"
        >
          {text}
        </text>
      ))}
    </>
  );
}

function sentenceFor(runs: readonly VerdictRun[]): string {
  const last = runs.at(-1) as VerdictRun;
  const since = `${last.verdict} since ${formatCalendarDate(last.from)}, from ${formatNoun(last.n, 'failure')}`;
  const before = runs.at(-2);
  const sentence = before === undefined ? since : `${since}; ${before.verdict} before`;
  const why = last.why === null ? '' : ` ${last.why}`;
  return `${sentence.charAt(0).toUpperCase()}${sentence.slice(1)}.${why}`;
}
