import { expect, it } from 'vitest';

import { formatCalendarDate, formatDate, formatDateTime } from '~/format/date';

const lateEvening = new Date('2026-03-14T23:30:00Z');

it('shows the day it was in the zone asked for', () => {
  expect(formatDate(lateEvening, 'Europe/London')).toBe('14 March 2026');
  expect(formatDate(lateEvening, 'Europe/Berlin')).toBe('15 March 2026');
  expect(formatDate(lateEvening, 'America/New_York', 'short')).toBe('14 Mar 2026');
});

it('shows the time on a 24-hour clock, summer time included', () => {
  expect(formatDateTime(new Date('2026-07-01T08:05:00Z'), 'Europe/London')).toBe('1 July 2026, 09:05');
  expect(formatDateTime(new Date('2026-07-01T23:00:00Z'), 'Europe/London', 'short')).toBe(
    '2 Jul 2026, 00:00',
  );
});

it('shows a calendar date as it stands, whatever the zone', () => {
  expect(formatCalendarDate('2026-09-01')).toBe('1 September 2026');
  expect(formatCalendarDate('2026-09-01', 'short')).toBe('1 Sep 2026');
});

it('says so when a date is not known, and refuses a zone that does not exist', () => {
  expect(formatCalendarDate('soon')).toBe('not known');
  expect(formatDate(new Date(NaN), 'Europe/London')).toBe('not known');
  expect(() => formatDate(lateEvening, 'Larkmoor/Baths')).toThrow(RangeError);
});
