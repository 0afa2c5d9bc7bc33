import { formatAlike, formatCount, formatNoun, formatTrimmed } from '~/format/number';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

const daysAYear = 365.25;

/** Failures in the 30 days after a planned visit exceed the rest: the lower 90 % end of the rate ratio is above 1. */
export function afterVisit({ findings, marks }: CautionFacts): Caution | null {
  const visits = findings.scatter.afterVisit;
  if (visits === null || visits.low <= 1) return null;
  const { after, otherwise, ratio, low, high } = visits;
  const aYear = [after, otherwise].map(({ failures, exposure }) => (failures / exposure) * daysAYear);
  const format = formatAlike(aYear, 2);
  const upTo =
    high === null
      ? `at least ${formatTrimmed(low, 2)}`
      : `${formatTrimmed(low, 2)} to ${formatTrimmed(high, 2)}`;
  const times = ratio === null ? `${upTo} times` : `${formatTrimmed(ratio, 2)} times (${upTo})`;
  return {
    code: 'after-visit',
    severity: 'caution',
    sentence: `In the 30 days after ${formatNoun(visits.visits, 'planned visit')} ${marks.itemPlural} failed ${times} as often as at other times: ${formatCount(after.failures)} failures there, ${format(aYear[0]!)} a year each, against ${formatCount(otherwise.failures)} at other times, ${format(aYear[1]!)} a year each.`,
    action:
      'Look at how the visits are done: parts, fitting, start-up, what is disturbed. Fewer visits may mean fewer failures.',
  };
}
