import type { ClassFigures } from '~/advice/class-figures';
import { clockUnit } from '~/advice/clock-unit';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import { CumulativeFailuresChart } from '~/charts/cumulative-failures-chart';
import { Estimate } from '../estimate';
import { FigureList } from '../figure-list';
import { formatClock, formatCount, formatFixed, formatP, formatTrimmed } from '~/format/number';
import { MethodLink } from '../method-link';
import { QuestionSection } from '../question-section';
import { RoughIntervals } from './rough-intervals';
import { ShapeEstimate } from './shape-estimate';

interface QuestionTrendProps {
  conclusion: Pick<Conclusion, 'answers' | 'trend'>;
  findings: Pick<Findings, 'clock' | 'trend' | 'rate'>;
  figures: ClassFigures['cumulative'];
  itemSingular: string;
}

/** Question 1: does the class fail more often than it used to? */
export function QuestionTrend({ conclusion, findings, figures, itemSingular }: QuestionTrendProps) {
  const { laplace, militaryHandbook, slope, exactSlopeInterval, failuresPerPosition } = findings.trend;
  const { overall, lastYear, lastYearAgainstBefore } = findings.rate;
  const unit = clockUnit(findings.clock);
  const { short, sentence } = conclusion.answers.trend;
  const inClock = (value: number) => formatClock(value, unit);
  return (
    <QuestionSection
      id="more-often"
      title="1 · More often than before?"
      answer={short}
      words={
        <>
          <p>{sentence}</p>
          <RoughIntervals failures={overall.failures} />
          <FigureList
            items={[
              {
                name: <MethodLink id="trend-laplace">Laplace U</MethodLink>,
                value:
                  laplace === null ? 'no failure' : `${formatFixed(laplace.u, 2)}, ${formatP(laplace.p)}`,
              },
              {
                name: <MethodLink id="military-handbook">Military-handbook test</MethodLink>,
                value:
                  militaryHandbook === null
                    ? 'no failure'
                    : `${formatFixed(militaryHandbook.statistic, 2)} on ${formatCount(militaryHandbook.degreesOfFreedom)} df, ${formatP(militaryHandbook.p)}`,
              },
              { name: <MethodLink id="slope">Slope</MethodLink>, value: <ShapeEstimate fit={slope} /> },
              ...(exactSlopeInterval === null
                ? []
                : [
                    {
                      name: 'Exact interval',
                      value: `${formatFixed(exactSlopeInterval.low, 2)} to ${formatFixed(exactSlopeInterval.high, 2)}`,
                    },
                  ]),
              {
                name: <MethodLink id="mtbf">One failure in</MethodLink>,
                value: (
                  <Estimate
                    value={overall.meanTime}
                    low={overall.meanTimeInterval.low}
                    high={overall.meanTimeInterval.high}
                    n={overall.failures}
                    format={inClock}
                    formatEnd={formatTrimmed}
                    missing="nothing watched"
                  />
                ),
              },
              {
                name: 'In the last year',
                value: (
                  <Estimate
                    value={lastYear.meanTime}
                    low={lastYear.meanTimeInterval.low}
                    high={lastYear.meanTimeInterval.high}
                    n={lastYear.failures}
                    format={inClock}
                    formatEnd={formatTrimmed}
                    missing="nothing watched"
                  />
                ),
              },
              ...(lastYearAgainstBefore === null
                ? []
                : [
                    {
                      name: <MethodLink id="two-rates">Last year over before</MethodLink>,
                      value: (
                        <>
                          <Estimate
                            value={lastYearAgainstBefore.ratio}
                            low={lastYearAgainstBefore.low}
                            high={lastYearAgainstBefore.high}
                            format={(value) => formatFixed(value, 2)}
                          />
                          , {formatP(lastYearAgainstBefore.p)}
                        </>
                      ),
                    },
                  ]),
              ...(failuresPerPosition === null
                ? []
                : [
                    {
                      name: `Failures of one place by ${inClock(failuresPerPosition.age)}`,
                      value: (
                        <Estimate
                          value={failuresPerPosition.value}
                          low={failuresPerPosition.low}
                          high={failuresPerPosition.high}
                          format={(value) => formatFixed(value, 2)}
                        />
                      ),
                    },
                  ]),
            ]}
          />
        </>
      }
    >
      <CumulativeFailuresChart {...figures} exposureUnit={exposureUnitName(findings.clock, itemSingular)} />
    </QuestionSection>
  );
}

/** What running time is counted in on a class's pages: "seal-years", "thousand hours". */
export function exposureUnitName(clock: Findings['clock'], itemSingular: string): string {
  return clock === 'operating-hours' ? 'thousand hours' : `${itemSingular}-years`;
}
