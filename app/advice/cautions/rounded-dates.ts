import { formatCount, formatNoun, formatPercent } from '~/format/number';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

const manyOnTheFirst = 0.4;
const manyTied = 1 / 3;
/** Of fewer dates, two on one day would already be many. */
const fewestDates = 5;

/**
 * Over 40 % of dates on the first of a month, or ties over a third beyond those that chance makes: with many
 * failures and few days most dates are shared by chance alone, and say nothing about rounding.
 */
export function roundedDates({ findings }: CautionFacts): Caution | null {
  const { failures, onFirstOfMonth, tied, tiedByChance, withoutTime } = findings.scatter.dates;
  if (failures < fewestDates) return null;
  const parts: string[] = [];
  if (onFirstOfMonth > manyOnTheFirst * failures) {
    parts.push(
      `${formatCount(onFirstOfMonth)} of ${formatNoun(failures, 'failure')} (${formatPercent(onFirstOfMonth / failures)}) are dated the first of a month, where about 3\u202f% would be usual.`,
    );
  }
  if (tied - tiedByChance > manyTied * failures) {
    parts.push(
      `${formatCount(tied)} of ${formatNoun(failures, 'failure')} (${formatPercent(tied / failures)}) share their date with another, where chance makes about ${formatCount(tiedByChance)}.`,
    );
  }
  if (parts.length === 0) return null;
  return {
    code: 'rounded-dates',
    severity: 'caution',
    sentence: `${parts.join(' ')} Such dates look rounded or entered in bulk; ages and order are only as good as they are. ${formatCount(withoutTime)} of them have no time of day.`,
    action: 'Ask where the dates come from, and log failures on the day they happen.',
  };
}
