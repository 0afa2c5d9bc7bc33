import type { DateTime } from 'luxon';

/** The last day that is over at a moment, in that moment's zone: 'YYYY-MM-DD'. */
export function lastCompleteDay(moment: DateTime): string {
  return moment.minus({ days: 1 }).toFormat('yyyy-MM-dd');
}

/**
 * Whether a night has been missed: the last complete day is later than the last one that was assessed.
 *
 * Assessing the newest day makes up for all missed ones, since each assessment takes in every record up
 * to its day.
 */
export function nightIsDue(lastFinished: string | null, moment: DateTime): boolean {
  return lastFinished === null || lastFinished < lastCompleteDay(moment);
}
