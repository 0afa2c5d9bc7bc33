import { formatCount, formatNoun, formatPercent } from '~/format/number';
import {
  layoutAgeRank,
  usableMarks,
  type AgeRankData,
  type AgeRankLayout,
  type AgeRankMark,
  mostMarksListed,
} from './age-rank-layout';
import { ChartAbsent, ChartFigure, type ChartTable } from './chart-figure';
import { ChartLabels } from './chart-labels';
import { FONT_SIZE } from './plot-frame';

interface AgeRankStripProps extends AgeRankData {
  /** Failures at which all peers were of one age, so that nothing can be told from them. */
  weightlessCount?: number;
  title?: string;
  sentence?: string;
}

/** Question 2: do the old ones go first? One mark a failure, placed by how many of its peers were younger. */
export function AgeRankStrip(props: AgeRankStripProps) {
  const {
    weightlessCount = 0,
    title = 'How old the failed one was among its peers',
    sentence,
    ...data
  } = props;
  const marks = usableMarks(data.marks);
  if (marks.length === 0) {
    const reason =
      weightlessCount > 0
        ? `${formatNoun(weightlessCount, 'failure')}, but each time all peers were of one age: nothing can be told from them.`
        : 'No failure with known ages yet, so there is nothing to compare.';
    return <ChartAbsent title={title} reason={reason} />;
  }
  return (
    <ChartFigure
      title={title}
      sentence={sentence ?? sentenceFor(data, marks.length, weightlessCount)}
      table={tableFor(marks)}
      draw={(size) => {
        const layout = layoutAgeRank(data, size);
        if (layout === null) return { width: 1, height: 1, content: null };
        return {
          width: layout.frame.width,
          height: layout.frame.height,
          content: <Strip layout={layout} isUndecided={data.verdict === 'undecided'} />,
        };
      }}
    />
  );
}

function Strip({ layout, isUndecided }: { layout: AgeRankLayout; isUndecided: boolean }) {
  const { frame, baseline, levelY, drawn, colour, mean, axisLabels, labels, xScale } = layout;
  const { x, width } = frame.plot;
  return (
    <>
      <rect x={x} y={levelY} width={width} height={baseline - levelY} fill="var(--ink)" fillOpacity="0.07" />
      {drawn.map((mark, index) => (
        <rect
          key={index}
          x={mark.x}
          y={mark.y}
          width={mark.width}
          height={mark.height}
          rx={Math.min(1, mark.height / 4)}
          fill={colour}
          fillOpacity={isUndecided ? mark.opacity * 0.75 : mark.opacity}
        />
      ))}
      <line x1={x} x2={x + width} y1={levelY} y2={levelY} stroke="var(--grey)" strokeDasharray="4 3" />
      <line x1={x} x2={x + width} y1={baseline} y2={baseline} stroke="var(--ink)" />
      {mean !== null && (
        <g>
          {mean.low !== null && mean.high !== null && (
            <line x1={mean.low} x2={mean.high} y1={mean.y} y2={mean.y} stroke={colour} strokeWidth="2.5" />
          )}
          <circle cx={mean.x} cy={mean.y} r="4.5" fill={colour} stroke="var(--paper)" strokeWidth="1" />
        </g>
      )}
      <line x1={xScale(0.5)} x2={xScale(0.5)} y1={baseline} y2={baseline + 5} stroke="var(--ink)" />
      {axisLabels.map(({ text, x: labelX, y, anchor }) => (
        <text key={text} x={labelX} y={y} textAnchor={anchor} fontSize={FONT_SIZE} fill="var(--ink)">
          {text}
        </text>
      ))}
      <ChartLabels labels={labels} />
    </>
  );
}

function sentenceFor(data: AgeRankData, count: number, weightless: number): string {
  const interval = data.meanInterval?.every(Number.isFinite)
    ? ` (90\u202f% interval ${formatPercent(Math.min(...data.meanInterval))} to ${formatPercent(Math.max(...data.meanInterval))})`
    : '';
  const parts = [
    count === 1
      ? `The one failed was older than ${formatPercent(data.meanShare)} of its peers.`
      : `Of ${formatCount(count)} that failed, the failed one was older than ${formatPercent(data.meanShare)} of its peers on average${interval}; if age did not matter that would be 50\u202f%.`,
  ];
  if (weightless > 0) {
    parts.push(
      `${formatNoun(weightless, 'more failure')} happened while all were of one age and ${weightless === 1 ? 'tells' : 'tell'} nothing here.`,
    );
  }
  return parts.join(' ');
}

/** Each failure while they can be read one by one, counts by tenth of the strip beyond. */
function tableFor(marks: readonly AgeRankMark[]): ChartTable {
  if (marks.length <= mostMarksListed) {
    return {
      columns: ['Failure', 'Peers younger'],
      rows: [...marks]
        .sort((a, b) => a.share - b.share)
        .map(({ label, share }) => [label, formatPercent(share)]),
    };
  }
  return {
    columns: ['Peers younger', 'Failures', 'If age did not matter'],
    rows: Array.from({ length: 10 }, (_, index) => {
      const held = marks.filter(({ share }) => Math.min(9, Math.floor(share * 10)) === index).length;
      return [
        `${index * 10} to ${(index + 1) * 10}\u202f%`,
        formatCount(held),
        formatCount(marks.length / 10),
      ];
    }),
  };
}
