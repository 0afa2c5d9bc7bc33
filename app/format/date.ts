import { NOT_KNOWN } from './number';

const formatters = new Map<string, Intl.DateTimeFormat>();

function partsOf(instant: Date, zone: string): Record<string, string> {
  let format = formatters.get(zone);
  if (format === undefined) {
    format = new Intl.DateTimeFormat('en-GB', {
      timeZone: zone,
      day: 'numeric',
      month: 'long',
      year: 'numeric',
      hour: '2-digit',
      minute: '2-digit',
      hourCycle: 'h23',
    });
    formatters.set(zone, format);
  }
  return Object.fromEntries(format.formatToParts(instant).map((part) => [part.type, part.value]));
}

function dateFrom(parts: Record<string, string>, length: 'long' | 'short'): string {
  const month = parts.month ?? '';
  return `${parts.day} ${length === 'short' ? month.slice(0, 3) : month} ${parts.year}`;
}

/**
 * The day of an instant in a time zone: "14 March 2026", short "14 Mar 2026".
 *
 * @throws RangeError for a zone the platform does not know.
 */
export function formatDate(instant: Date, zone: string, length: 'long' | 'short' = 'long'): string {
  if (Number.isNaN(instant.getTime())) return NOT_KNOWN;
  return dateFrom(partsOf(instant, zone), length);
}

/** Day and time of an instant in a time zone: "14 March 2026, 09:05". */
export function formatDateTime(instant: Date, zone: string, length: 'long' | 'short' = 'long'): string {
  if (Number.isNaN(instant.getTime())) return NOT_KNOWN;
  const parts = partsOf(instant, zone);
  return `${dateFrom(parts, length)}, ${parts.hour}:${parts.minute}`;
}

const months = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

/** A calendar date "2026-03-14", which belongs to no zone: "14 March 2026". What is no date is not known. */
export function formatCalendarDate(isoDate: string, length: 'long' | 'short' = 'long'): string {
  const [, year, month, day] = /^(\d{4})-(\d{2})-(\d{2})$/.exec(isoDate) ?? [];
  const exists = year !== undefined && !Number.isNaN(Date.parse(isoDate));
  if (!exists) return NOT_KNOWN;
  return dateFrom({ year, month: months[Number(month) - 1] ?? '', day: String(Number(day)) }, length);
}
