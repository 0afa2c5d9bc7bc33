/** A day of the (proleptic) Gregorian calendar. */
export interface CalendarDay {
  readonly year: number;
  /** 1 to 12. */
  readonly month: number;
  /** 1 to 31. */
  readonly day: number;
}

/**
 * The calendar day of a day number (days since 1970-01-01), by whole-number arithmetic alone: years are taken
 * from 1 March, so that the leap day comes last, in eras of 400 years of 146 097 days.
 *
 * Source: Hinnant, "chrono-compatible low-level date algorithms" (civil_from_days).
 */
export function calendarDay(dayNumber: number): CalendarDay {
  const sinceMarchOfYear0 = Math.floor(dayNumber) + 719_468;
  const era = Math.floor(sinceMarchOfYear0 / 146_097);
  const dayOfEra = sinceMarchOfYear0 - era * 146_097;
  const yearOfEra = Math.floor(
    (dayOfEra -
      Math.floor(dayOfEra / 1460) +
      Math.floor(dayOfEra / 36_524) -
      Math.floor(dayOfEra / 146_096)) /
      365,
  );
  const dayOfYear = dayOfEra - (365 * yearOfEra + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100));
  const monthFromMarch = Math.floor((5 * dayOfYear + 2) / 153);
  const month = monthFromMarch < 10 ? monthFromMarch + 3 : monthFromMarch - 9;
  return {
    year: yearOfEra + era * 400 + (month <= 2 ? 1 : 0),
    month,
    day: dayOfYear - Math.floor((153 * monthFromMarch + 2) / 5) + 1,
  };
}

/** The calendar day of a day number as 'YYYY-MM-DD'. */
export function isoDay(dayNumber: number): string {
  const { year, month, day } = calendarDay(dayNumber);
  return `${String(year).padStart(4, '0')}-${String(month).padStart(2, '0')}-${String(day).padStart(2, '0')}`;
}
