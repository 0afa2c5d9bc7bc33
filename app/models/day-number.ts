const millisecondsPerDay = 86_400_000;

/**
 * Days since 1970-01-01 of a calendar day.
 *
 * @param day 'YYYY-MM-DD'
 * @throws RangeError when it is not a day of the calendar.
 */
export function dayNumber(day: string): number {
  const milliseconds = Date.parse(`${day}T00:00:00Z`);
  if (Number.isNaN(milliseconds)) throw new RangeError(`${day} is not a calendar day`);
  return milliseconds / millisecondsPerDay;
}

/** The calendar day 'YYYY-MM-DD' in which a day number falls. */
export function dayOf(number: number): string {
  return new Date(Math.floor(number) * millisecondsPerDay).toISOString().slice(0, 10);
}
