import { clockUnit } from '~/advice/clock-unit';
import type { FollowUp, FollowUpPeriod } from '~/advice/follow-up';
import { FigureList } from '~/components/figure-list';
import { formatCalendarDate } from '~/format/date';
import { formatMoney } from '~/format/money';
import { formatClock, formatFixed, formatInterval, formatNoun } from '~/format/number';
import { dayNumber, dayOf } from '~/models/day-number';

interface FollowUpFiguresProps {
  followUp: FollowUp;
  asOf: string;
  clock: 'calendar-days' | 'operating-hours';
  currency: string;
}

/** What came of a change: the sentence, then the counts, the test and the cost behind it. */
export function FollowUpFigures({ followUp, asOf, clock, currency }: FollowUpFiguresProps) {
  const { sentence, base, after, ratio, low, high, cost, against } = followUp;
  const isTrial = against === 'rest';
  const [baseName, afterName] = isTrial ? ['The rest', 'On trial'] : ['Before', 'Since'];
  const tookOver = after.to < dayNumber(asOf) + 1 ? dayOf(after.to) : null;
  const money = (amount: number) => formatMoney(Math.round(amount), currency, 'never');
  return (
    <section aria-labelledby="follow-up" className="mt-8">
      <h2 id="follow-up">What came of it</h2>
      <p className="mt-1 text-[1.15rem]">{sentence}</p>
      <FigureList
        items={[
          { name: baseName, value: <Period period={base} clock={clock} /> },
          { name: afterName, value: <Period period={after} clock={clock} /> },
          {
            name: 'Failure rate',
            value:
              ratio === null
                ? 'no failure to compare with'
                : `${formatFixed(ratio, 2)} times that of ${isTrial ? 'the rest' : 'before'} (${formatInterval(low, high, (end) => formatFixed(end, 2))})`,
          },
          ...(cost === null
            ? []
            : [
                { name: `Cost, ${baseName.toLowerCase()}`, value: `${money(cost.base)} an item-year` },
                {
                  name: `Cost, ${afterName.toLowerCase()}`,
                  value: `${money(cost.after)} an item-year (${formatInterval(cost.afterLow, cost.afterHigh, money)})`,
                },
              ]),
        ]}
      />
      <p className="text-grey mt-2 text-[0.92rem]">
        As of the end of {formatCalendarDate(asOf)}
        {tookOver !== null && `; from ${formatCalendarDate(tookOver)} on another change took over`}. 90 %
        exact interval. It knows nothing of what else changed at the same time.
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
