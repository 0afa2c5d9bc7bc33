import { withArticle } from '~/format/article';
import { formatCount, formatInterval, formatNoun, formatNumber, formatTrimmed } from '~/format/number';
import { XAxis, YAxis } from './axes';
import { ChartAbsent, ChartFigure, type ChartTable } from './chart-figure';
import { ChartLabels } from './chart-labels';
import {
  layoutHazardByAge,
  usableHazard,
  type HazardByAgeData,
  type HazardByAgeLayout,
} from './hazard-by-age-layout';
import { Band, Curve, Hatch } from './marks';
import { spreadRows } from './spread-rows';

interface HazardByAgeChartProps extends HazardByAgeData {
  /** Unit of the ages, in the plural: "days". */
  ageUnit: string;
  /** One item of the class: "seal". */
  itemNoun: string;
  /** What the rates count: "failures per seal-year". */
  rateUnit: string;
  title?: string;
  sentence?: string;
}

/** Question 2: how often an item of each age fails, as seen and as fitted. */
export function HazardByAgeChart(props: HazardByAgeChartProps) {
  const { ageUnit, itemNoun, rateUnit, title = 'How often one fails at each age', sentence, ...data } = props;
  const usable = usableHazard(data);
  if (usable === null) {
    return (
      <ChartAbsent title={title} reason="No failure at a known age yet, so no rate by age can be drawn." />
    );
  }
  return (
    <ChartFigure
      title={title}
      sentence={sentence ?? sentenceFor(usable, itemNoun, ageUnit)}
      table={tableFor(usable, ageUnit, rateUnit)}
      draw={(size, idPrefix) => {
        const layout = layoutHazardByAge(data, size);
        if (layout === null) return { width: 1, height: 1, content: null };
        const { frame, xScale, yScale, xTicks, yTicks } = layout;
        return {
          width: frame.width,
          height: frame.height,
          content: (
            <>
              {layout.hatch !== null && <Hatch rect={layout.hatch} id={`${idPrefix}-hatch`} />}
              <YAxis frame={frame} scale={yScale} ticks={yTicks} label={rateUnit} />
              <Band upper={layout.upper} lower={layout.lower} colour="var(--rust)" />
              <Steps layout={layout} />
              <Curve points={layout.fitted} colour="var(--rust)" width={2.4} />
              <Curve points={layout.beyond} colour="var(--rust)" width={1.2} dashes="3 4" />
              <XAxis
                frame={frame}
                scale={xScale}
                ticks={xTicks}
                label={`age of the ${itemNoun}, ${ageUnit}`}
              />
              <ChartLabels labels={layout.labels} />
            </>
          ),
        };
      }}
    />
  );
}

/** Rates as seen: a bar over the ages, a whisker for the interval; an arrow where it goes on. */
function Steps({ layout }: { layout: HazardByAgeLayout }) {
  return layout.steps.map(({ x1, x2, middle, rateY, lowY, highY, isCut }) => (
    <g key={x1} stroke="var(--ink)" fill="none">
      <line x1={x1} x2={x2} y1={rateY} y2={rateY} strokeWidth="2.2" />
      <line x1={middle} x2={middle} y1={lowY} y2={highY} strokeWidth="1" />
      {isCut && <path d={`M${middle - 4} ${highY + 7}L${middle} ${highY}L${middle + 4} ${highY + 7}`} />}
    </g>
  ));
}

type Usable = NonNullable<ReturnType<typeof usableHazard>>;

function sentenceFor({ bands, notSeenFrom }: Usable, itemNoun: string, ageUnit: string): string {
  const failures = bands.reduce((sum, band) => sum + (Number.isFinite(band.failures) ? band.failures : 0), 0);
  const seen =
    bands.length === 0
      ? `The fitted rate at which a ${itemNoun} of each age fails.`
      : `How often ${withArticle(itemNoun)} of that age fails, from ${formatNoun(failures, 'failure')} in ${formatNoun(bands.length, 'age band')}, with 90\u202f% intervals and the fitted curve.`;
  return notSeenFrom === undefined
    ? seen
    : `${seen} Beyond ${formatTrimmed(notSeenFrom)} ${ageUnit} nothing is known.`;
}

function tableFor({ bands, curve }: Usable, ageUnit: string, rateUnit: string): ChartTable {
  if (bands.length === 0) {
    return {
      columns: [`Age, ${ageUnit}`, `Fitted, ${rateUnit}`],
      rows: spreadRows(curve, 12).map(({ age, rate }) => [formatTrimmed(age), formatNumber(rate)]),
    };
  }
  return {
    columns: [`Age, ${ageUnit}`, 'Failures', `Watched, ${ageUnit}`, rateUnit, '90\u202f% interval'],
    rows: bands.map(({ from, to, failures, exposure, rate, low, high }) => [
      `${formatTrimmed(from)} to ${formatTrimmed(to)}`,
      formatCount(failures),
      formatTrimmed(exposure),
      formatNumber(rate),
      formatInterval(low, high),
    ]),
  };
}
