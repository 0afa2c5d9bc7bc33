import { withArticle } from '~/format/article';
import { formatCount, formatNoun, formatPercent } from '~/format/number';
import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

/** Positions whose item at the start of the watch has no known fitting date, or records that contradict it. */
export function agesUnknown({ findings, marks }: ClassFacts): Caution | null {
  const {
    positions,
    livesLeftOut,
    livesDatedByRecord,
    conflictingDates,
    groupFailures,
    undatedGroupFailures,
  } = findings.extent;
  const parts: string[] = [];
  if (livesLeftOut > 0) {
    parts.push(
      `${formatCount(livesLeftOut)} of ${formatNoun(positions, 'position')} (${formatPercent(livesLeftOut / positions)}) had no known fitting date when the records began; the first ${marks.itemSingular} there is left out.`,
    );
  }
  if (livesDatedByRecord > 0) {
    parts.push(
      `${formatNoun(livesDatedByRecord, 'first life', 'first lives')} ${livesDatedByRecord === 1 ? 'is' : 'are'} dated only by what was noted when the ${marks.itemSingular} came out.`,
    );
  }
  if (conflictingDates > 0) {
    parts.push(
      `${formatNoun(conflictingDates, 'record')} ${conflictingDates === 1 ? 'gives' : 'give'} a fitting date that contradicts an earlier renewal; the renewal was believed.`,
    );
  }
  if (undatedGroupFailures > 0) {
    parts.push(
      `Of ${formatNoun(groupFailures, 'failure')} in groups, ${formatCount(undatedGroupFailures)} (${formatPercent(undatedGroupFailures / groupFailures)}) ${undatedGroupFailures === 1 ? 'does' : 'do'} not say how old the failed ${marks.itemSingular} was.`,
    );
  }
  if (parts.length === 0) return null;
  return {
    code: 'ages-unknown',
    severity: 'caution',
    sentence: parts.join(' '),
    action: `Note the fitting date on the asset where anybody knows it, and ask for it whenever ${withArticle(marks.itemSingular)} comes out.`,
  };
}
