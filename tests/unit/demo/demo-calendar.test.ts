import { describe, expect, it } from 'vitest';
import { demoCalendar } from '../../../db/seeds/demo-calendar';

describe('the demo calendar', () => {
  it('counts days back over leap days', () => {
    const { dayOf } = demoCalendar('2024-03-01', 'Europe/London');
    expect([dayOf(0), dayOf(-1), dayOf(-61)]).toEqual(['2024-03-01', '2024-02-29', '2023-12-31']);
  });

  it('keeps the local time of day in summer and in winter', () => {
    const { momentOf } = demoCalendar('2025-07-01', 'Europe/London');
    expect(momentOf(0, 500).toISOString()).toBe('2025-07-01T07:20:00.000Z');
    expect(momentOf(-180, 500).toISOString()).toBe('2025-01-02T08:20:00.000Z');
  });

  it.each(['2025-02-30', 'yesterday', '20250701'])('refuses %s', (day) => {
    expect(() => demoCalendar(day, 'Europe/London')).toThrow(RangeError);
  });
});
