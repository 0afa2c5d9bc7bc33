import { formatCount, formatNoun, formatNumber, formatTrimmed } from '~/format/number';
import { XAxis, YAxis } from './axes';
import { ChartAbsent, ChartFigure, type ChartTable } from './chart-figure';
import { ChartLabels } from './chart-labels';
import {
  layoutCumulativeFailures,
  usableCumulativeFailures,
  type CumulativeFailuresData,
} from './cumulative-failures-layout';
import { Band, Curve } from './marks';
import { spreadRows } from './spread-rows';

interface CumulativeFailuresChartProps extends CumulativeFailuresData {
  /** The clock the exposure is counted on, in the plural: "seal-years". */
  exposureUnit: string;
  title?: string;
  sentence?: string;
}

/** Question 1: does the class fail more often than it used to? Failures against pooled running time. */
export function CumulativeFailuresChart(props: CumulativeFailuresChartProps) {
  const { exposureUnit, title = 'Failures against running time', sentence, ...data } = props;
  const usable = usableCumulativeFailures(data);
  if (usable === null) {
    const watched = Number.isFinite(data.totalExposure) && data.totalExposure > 0;
    const reason = watched
      ? `No failure in ${formatTrimmed(data.totalExposure)} ${exposureUnit} watched, so there is nothing to draw.`
      : 'No running time has been watched yet, so there is nothing to draw.';
    return <ChartAbsent title={title} reason={reason} />;
  }
  return (
    <ChartFigure
      title={title}
      sentence={sentence ?? sentenceFor(usable, exposureUnit, data.staysInBand)}
      table={tableFor(usable, exposureUnit)}
      draw={(size) => {
        const layout = layoutCumulativeFailures(data, size);
        if (layout === null) return { width: 1, height: 1, content: null };
        const { frame, xScale, yScale, xTicks, yTicks } = layout;
        return {
          width: frame.width,
          height: frame.height,
          content: (
            <>
              <YAxis frame={frame} scale={yScale} ticks={yTicks} label="failures so far" />
              <Band upper={layout.upper} lower={layout.lower} colour="var(--slate)" />
              <Curve points={layout.constantRate} colour="var(--slate)" width={1.4} dashes="5 4" />
              <Curve points={layout.power} colour="var(--rust)" width={1.8} />
              <Curve points={layout.stairs} colour="var(--ink)" width={1.7} />
              <XAxis frame={frame} scale={xScale} ticks={xTicks} label={`running time, ${exposureUnit}`} />
              <ChartLabels labels={layout.labels} />
            </>
          ),
        };
      }}
    />
  );
}

type Usable = NonNullable<ReturnType<typeof usableCumulativeFailures>>;

function sentenceFor(
  { failures, totalExposure, band }: Usable,
  unit: string,
  staysInBand: boolean | undefined,
): string {
  const start = `${formatNoun(failures, 'failure')} in ${formatTrimmed(totalExposure)} ${unit}`;
  if (band.length < 2 || staysInBand === undefined) return `${start}.`;
  return staysInBand
    ? `${start}; the steps stay within the band a constant rate would give.`
    : `${start}; the steps leave the band a constant rate would give.`;
}

function tableFor({ steps, band, powerLaw }: Usable, unit: string): ChartTable {
  const bandAt = (exposure: number) => band.findLast((place) => place.exposure <= exposure);
  const expectedAt = (exposure: number) => powerLaw.findLast((place) => place.exposure <= exposure);
  return {
    columns: [
      `Running time, ${unit}`,
      'Failures so far',
      ...(band.length > 0 ? ['Constant rate, 90\u202f% band'] : []),
      ...(powerLaw.length > 0 ? ['Fitted power law'] : []),
    ],
    rows: spreadRows(steps).map(({ exposure, count }) => {
      const place = bandAt(exposure);
      const expected = expectedAt(exposure);
      return [
        formatTrimmed(exposure),
        formatCount(count),
        ...(band.length > 0
          ? [place === undefined ? '' : `${formatCount(place.low)} to ${formatCount(place.high)}`]
          : []),
        ...(powerLaw.length > 0 ? [expected === undefined ? '' : formatNumber(expected.expected)] : []),
      ];
    }),
  };
}
