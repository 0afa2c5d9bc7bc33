import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { lastCompleteDay, nightIsDue, nightsToCatchUp } from '../../../jobs/nights-due';

const at = (instant: string, zone: string) => DateTime.fromISO(instant, { zone: 'utc' }).setZone(zone);

describe('the last complete day', () => {
  it('is yesterday where the organisation is, not where the server is', () => {
    expect(lastCompleteDay(at('2026-06-30T11:30:00Z', 'Pacific/Kiritimati'))).toBe('2026-06-30');
    expect(lastCompleteDay(at('2026-06-30T11:30:00Z', 'Europe/London'))).toBe('2026-06-29');
    expect(lastCompleteDay(at('2026-06-30T03:30:00Z', 'America/Los_Angeles'))).toBe('2026-06-28');
  });

  it('holds on the nights on which the clock changes, and over the turn of the year', () => {
    expect(lastCompleteDay(at('2026-03-29T00:30:00Z', 'Europe/London'))).toBe('2026-03-28');
    expect(lastCompleteDay(at('2026-03-29T01:30:00Z', 'Europe/London'))).toBe('2026-03-28');
    expect(lastCompleteDay(at('2026-10-25T00:30:00Z', 'Europe/London'))).toBe('2026-10-24');
    expect(lastCompleteDay(at('2027-01-01T00:10:00Z', 'Europe/London'))).toBe('2026-12-31');
  });
});

describe('a night is due', () => {
  const morning = at('2026-06-30T08:00:00Z', 'Europe/London');

  it('before the first one, and after any missed one', () => {
    expect(nightIsDue(null, morning)).toBe(true);
    expect(nightIsDue('2026-06-28', morning)).toBe(true);
    expect(nightIsDue('2026-06-01', morning)).toBe(true);
  });

  it('not once the last complete day has been assessed', () => {
    expect(nightIsDue('2026-06-29', morning)).toBe(false);
  });
});

describe('the nights to catch up', () => {
  it('are the last one alone, which makes up for all before', () => {
    expect(nightsToCatchUp('2026-06-29', { demo: false, hasNights: false })).toEqual(['2026-06-29']);
    expect(nightsToCatchUp('2026-06-29', { demo: true, hasNights: true })).toEqual(['2026-06-29']);
  });

  it('give a new demo a past, the oldest first and the last complete day at the end', () => {
    const nights = nightsToCatchUp('2026-06-29', { demo: true, hasNights: false });
    expect(nights).toEqual([...nights].sort());
    expect(nights[0]).toBe('2024-07-09');
    expect(nights.at(-2)).toBe('2026-06-28');
    expect(nights.at(-1)).toBe('2026-06-29');
  });
});
