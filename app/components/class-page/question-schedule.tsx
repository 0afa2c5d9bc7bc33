import type { ReactNode } from 'react';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import { intervalWords } from '~/advice/practicable-interval';
import type { PricedSchedule, RangedMoney, ScheduleFindings } from '~/advice/schedule-findings';
import { formatMoney } from '~/format/money';
import { formatInterval, formatPercent } from '~/format/number';
import { FigureList } from '../figure-list';
import { MethodLink } from '../method-link';
import { QuestionSection } from '../question-section';
import { CostCurve } from './cost-curve';

interface QuestionScheduleProps {
  answer: Conclusion['answers']['schedule'];
  clock: Findings['clock'];
  schedule: ScheduleFindings;
  /** ISO 4217. */
  currency: string;
  /** Where the costs can be given, for those who may; shown where they are missing. */
  costsLink: ReactNode;
  /** What follows the curve. */
  children?: ReactNode;
}

const policyWords: Record<PricedSchedule['policy'], string> = {
  'age-replacement': 'each item by its own age',
  'minimal-repair': 'periodic, failures patched in between',
  'block-replacement': 'the whole group in one visit',
};

/** Question 3: does a schedule pay? */
export function QuestionSchedule(props: QuestionScheduleProps) {
  const { answer, clock, schedule, currency, costsLink, children } = props;
  return (
    <QuestionSection
      id="schedule-pays"
      title="3 · Does a schedule pay?"
      answer={answer.short}
      words={
        <>
          <p>{answer.sentence}</p>
          <FigureList
            items={[
              {
                name: 'Today',
                value:
                  schedule.current.interval === null
                    ? 'no planned renewal'
                    : `every ${intervalWords(schedule.current.interval, clock)}`,
              },
              ...(schedule.kind === 'priced' ? pricedFigures(schedule, clock, currency) : []),
              ...testFigures(schedule, clock),
            ]}
          />
        </>
      }
    >
      {schedule.kind === 'priced' ? (
        <CostCurve schedule={schedule} clock={clock} currency={currency} />
      ) : (
        <p className="text-grey">
          {schedule.kind === 'costs-missing'
            ? 'No costs, no curve: say what a planned renewal and what a failure cost.'
            : 'There is no curve of cost before there is a curve of failures by age.'}{' '}
          {schedule.kind === 'costs-missing' && costsLink}
        </p>
      )}
      {children}
    </QuestionSection>
  );
}

function pricedFigures(schedule: PricedSchedule, clock: Findings['clock'], currency: string) {
  const { costs, best, today, changes, policy } = schedule;
  const money = (amount: number) => formatMoney(amount, currency);
  const aYear = ({ value, low, high }: RangedMoney) =>
    `${formatMoney(value, currency, 'never')} a year (${formatInterval(low, high, (end) => formatMoney(end, currency, 'never'))})`;
  return [
    { name: 'A planned renewal', value: money(costs.plannedMinor) },
    { name: 'A failure', value: money(costs.failureMinor) },
    {
      name: <MethodLink id={policy}>Renewed</MethodLink>,
      value: policyWords[policy],
    },
    { name: 'Today costs', value: aYear(today) },
    { name: 'Run to failure', value: aYear(changes.stop.costPerYear) },
    ...(changes.best === null || best.interval === null
      ? []
      : [
          {
            name: <MethodLink id="age-replacement">Best interval</MethodLink>,
            value: intervalWords(best.interval, clock),
          },
          { name: 'It would cost', value: aYear(changes.best.costPerYear) },
          {
            name: <MethodLink id="draws">Saves money in</MethodLink>,
            value: `${formatPercent(changes.best.share)} of what the records leave possible`,
          },
        ]),
  ];
}

/** The test interval of a hidden function; any statutory one comes first. */
function testFigures({ failureFinding }: ScheduleFindings, clock: Findings['clock']) {
  if (failureFinding === null) return [];
  const { requiredAvailability, practicable } = failureFinding;
  return [
    {
      name: `To find failures at ${formatPercent(requiredAvailability, 1)} availability`,
      value:
        practicable === null
          ? 'no interval is short enough'
          : `test every ${intervalWords(practicable, clock)}; a statutory interval comes first`,
    },
  ];
}
