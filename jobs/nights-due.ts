import { DateTime } from 'luxon';

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

/** Days before the last one as of which a demo's past is assessed first, so that it has one. */
const demoNights = [720, 540, 360, 240, 150, 90, 60, 30, 14, 7, 1];

/**
 * The nights to run, the oldest first: the last complete day's, and in a demo that has no night yet some of its past.
 *
 * @param hasNights whether any night has ever finished
 */
export function nightsToCatchUp(
  lastDay: string,
  { demo, hasNights }: { demo: boolean; hasNights: boolean },
): string[] {
  if (!demo || hasNights) return [lastDay];
  const day = DateTime.fromISO(lastDay, { zone: 'utc' });
  return [...demoNights.map((days) => day.minus({ days }).toISODate() ?? lastDay), lastDay];
}
