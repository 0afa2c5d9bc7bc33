import { formatClock, formatPercent } from '~/format/number';
import { clockUnit } from '../clock-unit';
import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';
import { maskedAge } from '../masking';

/**
 * Planned renewals end at least half of all lives, and under 5 % of the exposure lies beyond the age at
 * which they usually come: the data say nothing about older items (Nowlan & Heap 1978).
 */
export function maskedBySchedule({ findings, marks }: ClassFacts): Caution | null {
  const age = maskedAge(findings);
  if (age === null) return null;
  const { lives, livesEndedByPlannedRenewal } = findings.extent;
  const until = formatClock(age, clockUnit(findings.clock));
  return {
    code: 'masked-by-schedule',
    severity: 'caution',
    sentence: `Masked beyond ${until}: the schedule ends ${formatPercent(livesEndedByPlannedRenewal / lives)} of all lives by then. Nothing here says how ${marks.itemPlural} would last after that.`,
    action:
      'To learn more, try a longer interval on a part of the class and watch it; never stop the schedule outright on this.',
  };
}
