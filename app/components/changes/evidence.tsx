import { href, Link } from 'react-router';
import { clockUnit } from '~/advice/clock-unit';
import { CautionList } from '~/components/caution-list';
import { FigureList } from '~/components/figure-list';
import { VerdictWord } from '~/components/verdict-word';
import { formatCalendarDate } from '~/format/date';
import { formatClock, formatCount, formatFixed, formatInterval } from '~/format/number';
import type { Verdict } from '~/advice/verdict';
import type { Change } from '~/models/schedule-change';

interface EvidenceProps {
  change: Pick<Change, 'classId' | 'evidence' | 'itemPlural'>;
  /** What the class is called today; null where it is not assessed any more. */
  verdictNow: Verdict | null;
}

/** What a change rested on when it was put forward, frozen; and whether the class is still called the same. */
export function Evidence({ change, verdictNow }: EvidenceProps) {
  const { asOf, conclusion, findings } = change.evidence;
  const { fit, meanLife } = findings.life;
  const unit = clockUnit(findings.clock);
  return (
    <section aria-labelledby="evidence" className="mt-8">
      <h2 id="evidence">What it rests on</h2>
      <p className="text-grey text-[0.92rem]">
        As it stood at the end of {formatCalendarDate(asOf)}, kept as it was.
      </p>
      <p className="mt-2 text-[1.15rem]">
        <strong>{conclusion.headline.claim}</strong> {conclusion.headline.support}
      </p>
      <FigureList
        items={[
          { name: 'Verdict', value: <VerdictWord verdict={conclusion.verdict} /> },
          { name: 'More often than before?', value: conclusion.answers.trend.short },
          { name: 'Do the old ones go first?', value: conclusion.answers.age.short },
          { name: 'Does a schedule pay?', value: conclusion.answers.schedule.short },
          {
            name: 'Shape β',
            value:
              fit.kind === 'fit'
                ? `${formatFixed(fit.shape, 2)} (${formatInterval(fit.shapeInterval.low, fit.shapeInterval.high, (end) => formatFixed(end, 2))}), n = ${formatCount(fit.failures)}`
                : fit.reason,
          },
          ...(meanLife === null
            ? []
            : [
                {
                  name: 'Mean life',
                  value: `${formatClock(meanLife.value, unit)} (${formatInterval(meanLife.interval.low, meanLife.interval.high, (end) => formatClock(end, unit))})`,
                },
              ]),
        ]}
      />
      {verdictNow !== null && verdictNow !== conclusion.verdict && (
        <p className="mt-3 font-bold">
          Since then the verdict has changed: {change.itemPlural} are now called {verdictNow}.
        </p>
      )}
      <p className="mt-3">
        <Link to={href('/classes/:classId', { classId: change.classId })}>The class as it stands today</Link>
      </p>
    </section>
  );
}

/** The cautions of the night the change rests on: before any button. */
export function CautionsThen({ change }: { change: Pick<Change, 'evidence'> }) {
  return (
    <section aria-labelledby="cautions" className="mt-8">
      <h2 id="cautions">Cautions</h2>
      <div className="mt-2">
        <CautionList cautions={change.evidence.conclusion.cautions} />
      </div>
    </section>
  );
}
