import type { ForecastFindings } from '~/advice/forecast-findings';
import { formatCount, formatNoun, formatPercent, formatTrimmed } from '~/format/number';
import { FigureList } from '../figure-list';
import { MethodLink } from '../method-link';
import { QuestionSection } from '../question-section';

type Forecast = Extract<ForecastFindings, { kind: 'forecast' }>;

const basisWords: Record<Forecast['basis'], string> = {
  rate: 'From the rate over all records.',
  'last-year-rate': 'From the rate of the last year, which differs from the rate before.',
  ages: 'From the ages of the items in place, planned renewals included.',
};

/** Failures to come, and the spares a lead time needs. */
export function ExpectedFailures({
  forecast,
  itemPlural,
}: {
  forecast: ForecastFindings;
  itemPlural: string;
}) {
  if (forecast.kind === 'nothing-to-go-by') return null;
  const { basis, confidence, periods, spares, agesUnknown, positions } = forecast;
  return (
    <QuestionSection
      id="to-come"
      title="To come"
      words={
        <p className="text-grey text-[0.92rem]">
          {basisWords[basis]} <MethodLink id="forecast">Ranges</MethodLink> hold {formatPercent(confidence)}{' '}
          of what may happen.
          {basis === 'ages' &&
            agesUnknown > 0 &&
            ` ${formatCount(agesUnknown)} of ${formatCount(positions)} ${itemPlural} are of unknown age and taken as the others.`}
        </p>
      }
    >
      <FigureList
        items={[
          ...periods.map(({ months, mean, low, high }) => ({
            name: `Next ${formatNoun(months, 'month')}`,
            value: `${formatTrimmed(mean)} failures (${formatCount(low)} to ${formatCount(high)})`,
          })),
          {
            name: <MethodLink id="spares">Spares to hold</MethodLink>,
            value:
              spares === null
                ? 'set the lead time of spares in the class settings'
                : `${formatCount(spares.spares)} for ${formatNoun(spares.leadTimeDays, 'day')}, enough in ${formatPercent(spares.serviceLevel)} of cases`,
          },
        ]}
      />
    </QuestionSection>
  );
}
