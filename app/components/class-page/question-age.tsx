import type { ClassFigures } from '~/advice/class-figures';
import { clockUnit } from '~/advice/clock-unit';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import type { LifeEstimate } from '~/advice/life-estimates';
import { AgeRankStrip } from '~/charts/age-rank-strip';
import { HazardByAgeChart } from '~/charts/hazard-by-age-chart';
import { Estimate } from '../estimate';
import { FigureList } from '../figure-list';
import { formatClock, formatFixed, formatNoun, formatP, formatPercent, formatTrimmed } from '~/format/number';
import { MethodLink } from '../method-link';
import { QuestionSection } from '../question-section';
import { VERDICT_COLOUR } from '../verdict';
import { RoughIntervals } from './rough-intervals';
import { ShapeEstimate } from './shape-estimate';

interface QuestionAgeProps {
  conclusion: Pick<Conclusion, 'answers' | 'verdict'>;
  findings: Pick<Findings, 'clock' | 'life'>;
  /** The strip's marks; `day` in words, for the table behind. */
  ageRank: {
    marks: readonly { share: number; day: string }[];
    meanShare: number | null;
    z: number | null;
    p: number | null;
    weightless: number;
  };
  figures: ClassFigures['hazard'];
  itemSingular: string;
}

/** Question 2: do the old ones go first? */
export function QuestionAge(props: QuestionAgeProps) {
  const { conclusion, findings, ageRank, figures, itemSingular } = props;
  const { fit, meanLife, tenthGone, memorylessTest, cumulativeHazard } = findings.life;
  const unit = clockUnit(findings.clock);
  const { short, sentence } = conclusion.answers.age;
  const inClock = (value: number | null) => (value === null ? 'not known' : formatClock(value, unit));
  return (
    <QuestionSection
      id="old-ones-first"
      title="2 · Do the old ones go first?"
      answer={<span style={{ color: VERDICT_COLOUR[conclusion.verdict] }}>{short}</span>}
      words={
        <>
          <p>{sentence}</p>
          <p className="text-grey mt-2 text-[0.92rem]">
            Each mark is one failure, placed by how many of its peers were younger that day. If age did not
            matter they would lie level.
          </p>
          <RoughIntervals failures={fit.failures} />
          <FigureList
            items={[
              { name: <MethodLink id="life-fit">Shape β</MethodLink>, value: <ShapeEstimate fit={fit} /> },
              { name: 'Characteristic life', value: inClock(fit.kind === 'fit' ? fit.scale : null) },
              {
                name: <MethodLink id="life-fit">Mean life (MTTF)</MethodLink>,
                value: <LifeLength life={meanLife} unit={unit} />,
              },
              {
                name: <MethodLink id="life-fit">One in ten gone by (B10)</MethodLink>,
                value: <LifeLength life={tenthGone} unit={unit} />,
              },
              ...(cumulativeHazard === null
                ? []
                : [
                    {
                      name: `Cumulative hazard by ${inClock(cumulativeHazard.age)}`,
                      value: (
                        <Estimate
                          value={cumulativeHazard.value}
                          low={cumulativeHazard.low}
                          high={cumulativeHazard.high}
                          format={(value) => formatFixed(value, 2)}
                        />
                      ),
                    },
                  ]),
              {
                name: <MethodLink id="likelihood-ratio">Against a constant rate</MethodLink>,
                value:
                  memorylessTest === null
                    ? 'not known'
                    : `likelihood ratio ${formatFixed(memorylessTest.statistic, 2)}, ${formatP(memorylessTest.p)}`,
              },
              {
                name: <MethodLink id="age-rank">Age-rank z</MethodLink>,
                value:
                  ageRank.z === null || ageRank.p === null
                    ? 'not known'
                    : `${formatFixed(ageRank.z, 2)}, ${formatP(ageRank.p)}`,
              },
            ]}
          />
        </>
      }
    >
      <AgeRankStrip
        marks={ageRank.marks.map(({ share, day }) => ({ share, label: day }))}
        meanShare={ageRank.meanShare ?? 0.5}
        verdict={conclusion.verdict}
        weightlessCount={ageRank.weightless}
        sentence={stripSentence(ageRank)}
      />
      <HazardByAgeChart
        {...figures}
        ageUnit={unit}
        itemNoun={itemSingular}
        rateUnit={unit === 'hours' ? 'failures per thousand hours' : `failures per ${itemSingular}-year`}
      />
    </QuestionSection>
  );
}

/** Where the marks lie on average; the sentence of the page counts the others only, the strip the item itself too. */
function stripSentence({ marks, meanShare, weightless }: QuestionAgeProps['ageRank']): string | undefined {
  if (meanShare === null) return undefined;
  const saysNothing =
    weightless === 0
      ? ''
      : ` ${formatNoun(weightless, 'failure')} while all were of one age say nothing here.`;
  return `${formatNoun(marks.length, 'failure')}; on average the failed one stood ${formatPercent(meanShare)} of the way from the youngest to the oldest. If age did not matter that would be 50\u202f%.${saysNothing}`;
}

function LifeLength({ life, unit }: { life: LifeEstimate; unit: 'days' | 'hours' }) {
  return (
    <Estimate
      value={life?.value ?? null}
      low={life?.interval.low ?? null}
      high={life?.interval.high ?? null}
      format={(value) => formatClock(value, unit)}
      formatEnd={formatTrimmed}
      missing="not known"
    />
  );
}
