import { capitalised } from './capitalised';
import type { ClockKind } from './class-evidence';
import type { Conclusion } from './conclusion';
import { ageWords, everyWords } from './practicable-interval';
import type { ScheduleFindings } from './schedule-findings';

interface WantedChange {
  /** Clock units; null for run to failure. */
  readonly to: number | null;
  /** Whether it is tried on a part only. */
  readonly onPart: boolean;
}

interface Standing {
  readonly schedule: ScheduleFindings;
  readonly conclusion: Pick<Conclusion, 'cautions'>;
  readonly clock: ClockKind;
  readonly itemPlural: string;
}

/**
 * Why a change chosen by hand cannot be put forward, in a sentence that says what can; null where it can. The rules are
 * the proposal's own: no interval for the whole class beyond the ages seen, and no outright stop where the
 * schedule hides what would come (age exploration, Nowlan & Heap 1978).
 */
export function refuseChange({ to, onPart }: WantedChange, standing: Standing): string | null {
  const { schedule, conclusion, clock, itemPlural } = standing;
  const today = schedule.current.interval;
  if (to === today) {
    return today === null
      ? `${capitalised(itemPlural)} run to failure today already.`
      : `They are replaced ${everyWords(today, clock)} today already.`;
  }
  if (onPart) return null;
  const isMasked = conclusion.cautions.some(({ code }) => code === 'masked-by-schedule');
  if (to === null) {
    return isMasked
      ? 'Today’s schedule hides what comes after it, so that stopping for the whole class is not put forward. Try a longer interval on a part first.'
      : null;
  }
  if (today !== null && to < today) return null;
  const { supportedAge } = schedule;
  if (supportedAge === null)
    return `Too few ${itemPlural} of known age were watched for an interval to be put forward.`;
  return to > supportedAge
    ? `The records reach to about ${ageWords(supportedAge, clock)}; a longer interval can only be tried on a part.`
    : null;
}
