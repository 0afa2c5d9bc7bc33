import { DateTime } from 'luxon';

const minutesToNoon = 720;
const millisecondsPerMinute = 60_000;

export interface DemoCalendar {
  /** The day 'YYYY-MM-DD' at an offset from today. */
  readonly dayOf: (offset: number) => string;
  /** The moment at a minute of that local day, counted from noon: exact in working hours, clocks change at night. */
  readonly momentOf: (offset: number, minute: number) => Date;
}

/**
 * Puts the demo's day offsets on the calendar.
 *
 * @param today 'YYYY-MM-DD', the day of offset 0.
 * @throws RangeError when it is not a day.
 */
export function demoCalendar(today: string, timeZone: string): DemoCalendar {
  const start = DateTime.fromISO(today, { zone: timeZone });
  if (!start.isValid || start.toISODate() !== today) throw new RangeError(`${today} is not a day`);
  // Thousands of records share a thousand days, and finding a local day is slow.
  const days = new Map<number, { day: string; noon: number }>();
  const local = (offset: number) => {
    const known = days.get(offset);
    if (known !== undefined) return known;
    const date = start.plus({ days: offset });
    const found = { day: date.toFormat('yyyy-MM-dd'), noon: date.set({ hour: 12 }).toMillis() };
    days.set(offset, found);
    return found;
  };
  return {
    dayOf: (offset) => local(offset).day,
    momentOf: (offset, minute) =>
      new Date(local(offset).noon + (minute - minutesToNoon) * millisecondsPerMinute),
  };
}
