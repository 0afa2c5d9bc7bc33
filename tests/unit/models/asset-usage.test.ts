import { describe, expect, it } from 'vitest';
import { assetUsage } from '~/models/asset-usage';
import type { AssetRow, ReadingRow } from '~/models/class-records.server';
import { dayNumber } from '~/models/day-number';

const asset = (dutyHoursPerDay: number | null): AssetRow => ({
  id: 'fan',
  tag: 'FAN-1',
  siteId: 'site',
  siteName: 'Fenwick Baths',
  quantity: 1,
  inServiceOn: '2024-01-01',
  watchedFrom: '2024-01-01',
  watchedUntil: null,
  retiredOn: null,
  itemFittedOn: null,
  dutyHoursPerDay,
});

const reading = (day: string, hours: number, meterChanged = false): ReadingRow => ({
  assetId: 'fan',
  day,
  hours,
  meterChanged,
});

/** Hours between two days. */
function hoursBetween(clock: ReturnType<typeof assetUsage>, from: string, to: string): number {
  if (clock === null) throw new Error('there is no clock');
  return clock.usage.at(dayNumber(to)) - clock.usage.at(dayNumber(from));
}

describe('the clock of an asset', () => {
  const readings = [reading('2025-01-01', 1000), reading('2025-01-11', 1060), reading('2025-01-21', 1260)];

  it('is the calendar for a class that counts days, whatever its meter says', () => {
    const clock = assetUsage(asset(8), 'calendar-days', readings);
    expect(hoursBetween(clock, '2025-01-01', '2025-01-21')).toBe(20);
    expect(clock?.isAssumed).toBe(false);
  });

  it('runs straight between readings and at the duty outside them', () => {
    const clock = assetUsage(asset(8), 'operating-hours', readings);
    expect(hoursBetween(clock, '2025-01-01', '2025-01-06')).toBeCloseTo(30, 9);
    expect(hoursBetween(clock, '2025-01-06', '2025-01-16')).toBeCloseTo(130, 9);
    expect(hoursBetween(clock, '2024-12-22', '2025-01-01')).toBeCloseTo(80, 9);
    expect(hoursBetween(clock, '2025-01-21', '2025-01-31')).toBeCloseTo(80, 9);
    expect(clock?.isAssumed).toBe(false);
  });

  it('takes the mean of the readings outside them where no duty is known', () => {
    const clock = assetUsage(asset(null), 'operating-hours', readings);
    expect(hoursBetween(clock, '2025-01-21', '2025-01-31')).toBeCloseTo(130, 9);
  });

  it('goes on from the old meter to a new one at the duty, and never back', () => {
    const clock = assetUsage(asset(8), 'operating-hours', [
      ...readings,
      reading('2025-01-31', 5, true),
      reading('2025-02-10', 125),
    ]);
    expect(hoursBetween(clock, '2025-01-21', '2025-01-31')).toBeCloseTo(80, 9);
    expect(hoursBetween(clock, '2025-01-31', '2025-02-10')).toBeCloseTo(120, 9);
    expect(hoursBetween(clock, '2025-01-01', '2025-02-10')).toBeCloseTo(460, 9);
  });

  it('goes on over a change of meter at the mean of the old one where no duty is known', () => {
    const clock = assetUsage(asset(null), 'operating-hours', [...readings, reading('2025-01-31', 0, true)]);
    expect(hoursBetween(clock, '2025-01-21', '2025-01-31')).toBeCloseTo(130, 9);
  });

  it('is the duty, and assumed, with a single reading or none', () => {
    for (const few of [[], readings.slice(0, 1)]) {
      const clock = assetUsage(asset(8), 'operating-hours', few);
      expect(hoursBetween(clock, '2025-03-01', '2025-03-11')).toBe(80);
      expect(clock?.isAssumed).toBe(true);
    }
  });

  it('is not there when nothing says how long it runs', () => {
    expect(assetUsage(asset(null), 'operating-hours', [])).toBeNull();
    expect(assetUsage(asset(null), 'operating-hours', readings.slice(0, 1))).toBeNull();
    const stood = [reading('2025-01-01', 1000), reading('2025-03-01', 1000)];
    expect(assetUsage(asset(null), 'operating-hours', stood)).toBeNull();
  });
});
