import type { Findings } from '~/advice/findings';
import { capitalised } from '~/advice/capitalised';
import { leftOutSentence } from '~/advice/left-out-sentence';
import { FigureList } from '../figure-list';
import { formatCount, formatNoun } from '~/format/number';
import { QuestionSection } from '../question-section';
import type { ReactNode } from 'react';

interface RestsOnProps {
  findings: Pick<Findings, 'extent' | 'leftOut' | 'ageRank' | 'rate'>;
  itemSingular: string;
  /** First day under watch, in words; null when nothing is watched. */
  watchedSince: string | null;
  children: ReactNode;
}

/** What a class's assessment rests on: how much was watched, and which records took no part and why. */
export function RestsOn({ findings, itemSingular, watchedSince, children }: RestsOnProps) {
  const { extent, leftOut, ageRank, rate } = findings;
  return (
    <QuestionSection
      id="rests-on"
      title="What it rests on"
      words={
        <FigureList
          items={[
            { name: 'Watched since', value: watchedSince ?? 'not watched' },
            { name: 'Positions', value: formatCount(extent.positions) },
            { name: 'Failures', value: formatCount(rate.overall.failures) },
            { name: 'Planned renewals', value: formatCount(extent.plannedRenewals) },
            { name: `${capitalised(itemSingular)} lives`, value: formatCount(extent.lives) },
            { name: '… ended by failure', value: formatCount(extent.livesEndedByFailure) },
            { name: '… by plan', value: formatCount(extent.livesEndedByPlannedRenewal) },
          ]}
        />
      }
    >
      <h3>Left out, and why</h3>
      <ul className="mt-2 mb-6 list-disc pl-5">
        {leftOut.map(({ reason, count }) => (
          <li key={reason}>{leftOutSentence(reason, count)}</li>
        ))}
        {extent.livesLeftOut > 0 && (
          <li>
            {formatNoun(extent.livesLeftOut, 'first life', 'first lives')} without a known fitting date: left
            out of the second question.
          </li>
        )}
        {ageRank.ageUnknown > 0 && (
          <li>{formatNoun(ageRank.ageUnknown, 'failure')} of an item of unknown age: not on the strip.</li>
        )}
        {extent.zeroLives > 0 && (
          <li>
            Not left out: {formatNoun(extent.zeroLives, 'failure')} on the very day of a renewal, counted at
            half a day of age.
          </li>
        )}
        {leftOut.length === 0 && extent.livesLeftOut === 0 && ageRank.ageUnknown === 0 && (
          <li>Nothing: every record took part.</li>
        )}
      </ul>
      {children}
    </QuestionSection>
  );
}
