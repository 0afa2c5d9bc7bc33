import { formatInterval, formatQuantity, formatTrimmed } from '~/format/number';
import { formatMoney, formatMoneyShort } from '~/format/money';
import { XAxis, YAxis } from './axes';
import { ChartAbsent, ChartFigure, type ChartTable } from './chart-figure';
import { ChartLabels } from './chart-labels';
import {
  layoutCostByInterval,
  usableCosts,
  type CostByIntervalData,
  type CostByIntervalLayout,
} from './cost-by-interval-layout';
import { Band, Curve, Hatch } from './marks';
import { spreadRows } from './spread-rows';

interface CostByIntervalChartProps extends CostByIntervalData {
  title?: string;
  sentence?: string;
}

/** Question 3: does a schedule pay? Cost a year against the interval between replacements. */
export function CostByIntervalChart(props: CostByIntervalChartProps) {
  const { title = 'What each interval would cost', sentence, ...data } = props;
  const usable = usableCosts(data);
  if (usable === null) {
    return (
      <ChartAbsent title={title} reason="There are no costs to compare yet, so no interval can be priced." />
    );
  }
  return (
    <ChartFigure
      title={title}
      sentence={sentence ?? sentenceFor(usable, data)}
      table={tableFor(usable, data)}
      draw={(size, idPrefix) => {
        const layout = layoutCostByInterval(data, size);
        if (layout === null) return { width: 1, height: 1, content: null };
        return {
          width: layout.frame.width,
          height: layout.frame.height,
          content: <Costs layout={layout} data={data} idPrefix={idPrefix} />,
        };
      }}
    />
  );
}

interface CostsProps {
  layout: CostByIntervalLayout;
  data: CostByIntervalData;
  idPrefix: string;
}

function Costs({ layout, data, idPrefix }: CostsProps) {
  const { frame, xScale, yScale, xTicks, yTicks, failureLine, hatch } = layout;
  const { x, width } = frame.plot;
  return (
    <>
      {hatch !== null && <Hatch rect={hatch} id={`${idPrefix}-hatch`} />}
      <YAxis frame={frame} scale={yScale} ticks={yTicks} label="cost a year" />
      {failureLine !== null && failureLine.low !== null && failureLine.high !== null && (
        <rect
          x={x}
          y={failureLine.high}
          width={width}
          height={Math.max(0, failureLine.low - failureLine.high)}
          fill="var(--slate)"
          fillOpacity="0.1"
        />
      )}
      <Band upper={layout.upper} lower={layout.lower} colour="var(--rust)" />
      {failureLine !== null && (
        <line
          x1={x}
          x2={x + width}
          y1={failureLine.y}
          y2={failureLine.y}
          stroke="var(--slate)"
          strokeWidth="1.6"
          strokeDasharray="5 4"
        />
      )}
      <Curve points={layout.line} colour="var(--rust)" width={2.4} />
      <XAxis
        frame={frame}
        scale={xScale}
        ticks={xTicks}
        label={`replaced every so many ${data.intervalUnit}s`}
      />
      {layout.markers.map(({ word, x: markX, y }) => (
        <circle
          key={word}
          cx={markX}
          cy={y}
          r="5.2"
          fill="var(--paper)"
          stroke="var(--ink)"
          strokeWidth="2.2"
        />
      ))}
      <ChartLabels labels={layout.labels} />
    </>
  );
}

type Usable = NonNullable<ReturnType<typeof usableCosts>>;

function sentenceFor({ today, best, tried, runToFailure }: Usable, data: CostByIntervalData): string {
  const priced = (word: string, cost: number, interval?: number) =>
    `${word}${interval === undefined ? '' : ` (${formatQuantity(interval, data.intervalUnit)})`} ${formatMoneyShort(cost, data.currency)}`;
  const parts = [
    ...(today === undefined ? [] : [priced("today's interval", today.cost, today.interval)]),
    ...(best === undefined ? [] : [priced('the best', best.cost, best.interval)]),
    ...(tried === undefined ? [] : [priced('the one tried', tried.cost, tried.interval)]),
    ...(runToFailure === null ? [] : [priced('run to failure', runToFailure.cost)]),
  ];
  const supported =
    data.supportedUntil === undefined || !Number.isFinite(data.supportedUntil)
      ? ''
      : ` Beyond ${formatQuantity(data.supportedUntil, data.intervalUnit)} the records say nothing.`;
  return `Cost a year: ${parts.join(', ')}. The shade is the middle 80\u202f% of what the records allow.${supported}`;
}

function tableFor(
  { curve, runToFailure }: Usable,
  { currency, intervalUnit }: CostByIntervalData,
): ChartTable {
  const money = (value: number) => formatMoney(value, currency, 'never');
  const rows = spreadRows(curve, 15).map(({ interval, cost, low, high }) => [
    formatTrimmed(interval),
    money(cost),
    formatInterval(low, high, money),
  ]);
  const never =
    runToFailure === null
      ? []
      : [
          [
            'never: run to failure',
            money(runToFailure.cost),
            runToFailure.range === null
              ? ''
              : formatInterval(runToFailure.range.low, runToFailure.range.high, money),
          ],
        ];
  return {
    columns: [`Interval, ${intervalUnit}s`, 'Cost a year', 'Middle 80\u202f%'],
    rows: [...rows, ...never],
  };
}
