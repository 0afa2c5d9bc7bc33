import { clockUnit } from '~/advice/clock-unit';
import type { FollowUp, FollowUpPeriod } from '~/advice/follow-up';
import { FigureList } from '~/components/figure-list';
import { formatCalendarDate } from '~/format/date';
import { formatMoney } from '~/format/money';
import { formatClock, formatFixed, formatInterval, formatNoun } from '~/format/number';
import { dayOf } from '~/models/day-number';

interface FollowUpFiguresProps {
  followUp: FollowUp;
  asOf: string;
  clock: 'calendar-days' | 'operating-hours';
  currency: string;
}

/** What came of a change: the sentence, then the counts, the test and the cost behind it. */
export function FollowUpFigures({ followUp, asOf, clock, currency }: FollowUpFiguresProps) {
  const { sentence, base, after, ratio, low, high, cost, against } = followUp;
  const baseName = against === 'rest' ? 'The rest of the class' : 'Before';
  const money = (amount: number) => formatMoney(Math.round(amount), currency, 'never');
  return (
    <section aria-labelledby="follow-up" className="mt-8">
      <h2 id="follow-up">What came of it</h2>
      <p className="mt-1 text-[1.15rem]">{sentence}</p>
      <FigureList
        items={[
          { name: baseName, value: <Period period={base} clock={clock} /> },
          { name: 'Since', value: <Period period={after} clock={clock} /> },
          {
            name: 'Failure rate, since over before',
            value:
              ratio === null
                ? 'no failure to compare with'
                : `${formatFixed(ratio, 2)} (${formatInterval(low, high, (end) => formatFixed(end, 2))})`,
          },
          ...(cost === null
            ? []
            : [
                { name: `${baseName}, cost an item-year`, value: money(cost.base) },
                {
                  name: 'Since, cost an item-year',
                  value: `${money(cost.after)} (${formatInterval(cost.afterLow, cost.afterHigh, money)})`,
                },
              ]),
        ]}
      />
      <p className="text-grey mt-2 text-[0.92rem]">
        As of the end of {formatCalendarDate(asOf)}. 90 % exact interval. It knows nothing of what else
        changed at the same time.
      </p>
    </section>
  );
}

function Period({ period, clock }: { period: FollowUpPeriod; clock: FollowUpFiguresProps['clock'] }) {
  const { failures, plannedRenewals, exposure, from, to } = period;
  return (
    <>
      {formatCalendarDate(dayOf(from), 'short')} to {formatCalendarDate(dayOf(to - 1), 'short')}:{' '}
      {formatNoun(failures, 'failure')}, {formatNoun(plannedRenewals, 'planned renewal')} in{' '}
      {formatClock(exposure, clockUnit(clock))}
    </>
  );
}
