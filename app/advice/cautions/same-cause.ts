import { formatFixed, formatNoun, formatP } from '~/format/number';
import { formatCalendarDate } from '~/format/date';
import { isoDay } from '../calendar-day';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/** Three or more failures of the class on one day, or at one site on one day, against chance (p < 0.01). */
export function sameCause({ findings }: CautionFacts): Caution | null {
  const { found, clusters } = findings.scatter.sameCause;
  const worst = clusters[0];
  if (worst === undefined) return null;
  const where = worst.siteName === null ? '' : ` at ${worst.siteName}`;
  const others = found > 1 ? ` ${formatNoun(found - 1, 'other day is', 'other days are')} like it.` : '';
  return {
    code: 'same-cause',
    severity: 'caution',
    sentence: `${formatNoun(worst.failures, 'failure')}${where} on ${formatCalendarDate(isoDay(worst.day))}, where ${formatFixed(worst.expected, worst.expected < 0.1 ? 3 : 1)} would be usual: they hardly came about independently (${formatP(worst.p)}).${others}`,
    action:
      'Look for what they have in common: a surge, water, a batch, one visit. If it came from outside, say so on the records; they count no more then.',
  };
}
