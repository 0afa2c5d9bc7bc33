import { formatQuantity, formatSpanDays, formatTrimmed } from '~/format/number';
import type { ClockKind } from './class-evidence';

export const daysAMonth = 365.25 / 12;
const daysAWeek = 7;
const weeksUpTo = 3 * daysAMonth;

/**
 * An interval that can be kept in a calendar: whole weeks under three months, whole months of 30.4375 days
 * above, operating hours to two significant digits.
 *
 * @param interval above 0, clock units.
 * @param direction 'down' gives the longest such interval that is not longer.
 * @returns null where rounding down leaves nothing.
 */
export function practicableInterval(interval: number, clock: ClockKind): number;
export function practicableInterval(interval: number, clock: ClockKind, direction: 'down'): number | null;
export function practicableInterval(
  interval: number,
  clock: ClockKind,
  direction: 'nearest' | 'down' = 'nearest',
): number | null {
  const step = intervalStep(interval, clock);
  const steps = interval / step;
  // A whole number of steps must stay itself whatever the last digit of the division.
  const whole = direction === 'down' ? Math.floor(steps + 1e-9) : Math.max(1, Math.round(steps));
  if (whole === 0) return null;
  return clock === 'operating-hours' ? Number((whole * step).toPrecision(2)) : whole * step;
}

/** What intervals of this length are rounded to. */
export function intervalStep(interval: number, clock: ClockKind): number {
  if (clock === 'calendar-days') return interval < weeksUpTo ? daysAWeek : daysAMonth;
  return 10 ** (Math.floor(Math.log10(interval)) - 1);
}

interface Amount {
  readonly value: number;
  readonly unit: string;
}

/** The unit in which an interval comes out whole: 365 days are 12 months, 1,461 days are 4 years. */
function amountOf(interval: number, clock: ClockKind): Amount {
  if (clock === 'operating-hours') return { value: interval, unit: 'h' };
  if (interval < weeksUpTo && interval % daysAWeek === 0)
    return { value: interval / daysAWeek, unit: 'week' };
  const months = Math.round(interval / daysAMonth);
  if (months === 0 || Math.abs(interval / daysAMonth - months) > 0.05)
    return { value: interval, unit: 'day' };
  if (months >= 36 && months % 12 === 0) return { value: months / 12, unit: 'year' };
  return { value: months, unit: 'month' };
}

/** An interval in words: "5 months", "8 weeks", "2 100 h". */
export function intervalWords(interval: number, clock: ClockKind): string {
  const { value, unit } = amountOf(interval, clock);
  return unit === 'h' ? `${formatTrimmed(value, 4)}\u202fh` : formatQuantity(value, unit);
}

/** An age in words, in round figures: "30 months", "2 100 h". */
export function ageWords(age: number, clock: ClockKind): string {
  return clock === 'operating-hours' ? `${formatTrimmed(age, 2)}\u202fh` : formatSpanDays(age);
}

/** A change in words, the unit said once where it is the same: "from 12 months to 5". */
export function changeWords(from: number, to: number, clock: ClockKind): string {
  const [before, after] = [amountOf(from, clock), amountOf(to, clock)];
  const same = before.unit === after.unit && before.unit !== 'h';
  return `from ${intervalWords(from, clock)} to ${same ? formatTrimmed(after.value, 4) : intervalWords(to, clock)}`;
}

/** "every 5 months", "every week". */
export function everyWords(interval: number, clock: ClockKind): string {
  const { value, unit } = amountOf(interval, clock);
  return value === 1 && unit !== 'h' ? `every ${unit}` : `every ${intervalWords(interval, clock)}`;
}
