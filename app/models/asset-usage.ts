import type { ClockKind } from '~/advice/class-evidence';
import { calendarUsage, dutyUsage, meteredUsage, type MeterKnot, type Usage } from '~/reliability/usage';
import type { AssetRow, ReadingRow } from './class-records.server';
import { dayNumber } from './day-number';

export interface AssetUsage {
  readonly usage: Usage;
  /** Whether the hours come from an assumed duty alone. */
  readonly isAssumed: boolean;
}

/**
 * How an asset's clock runs: the calendar, its hours meter with the duty outside the readings, or the duty
 * alone. Null when the class runs on operating hours and nothing says how many: no duty and fewer than two
 * readings.
 */
export function assetUsage(
  asset: AssetRow,
  clock: ClockKind,
  readings: readonly ReadingRow[],
): AssetUsage | null {
  if (clock === 'calendar-days') return { usage: calendarUsage, isAssumed: false };
  const knots = joinMeters(readings, asset.dutyHoursPerDay);
  const duty = asset.dutyHoursPerDay ?? meanDuty(knots);
  if (duty === null) return null;
  return knots.length < 2
    ? { usage: dutyUsage(duty), isAssumed: true }
    : { usage: meteredUsage(knots, duty), isAssumed: false };
}

/**
 * Readings of one meter after another as hours added up. Nobody read the old meter on the day it was
 * changed: between its last reading and the new meter's first one the duty stands in.
 */
function joinMeters(readings: readonly ReadingRow[], dutyHoursPerDay: number | null): MeterKnot[] {
  const knots: MeterKnot[] = [];
  let offset = 0;
  for (const { day, hours, meterChanged } of readings) {
    const at = dayNumber(day);
    const last = knots.at(-1);
    if (meterChanged && last !== undefined) {
      offset = last.hours + (at - last.at) * (dutyHoursPerDay ?? meanDuty(knots) ?? 0) - hours;
    }
    knots.push({ at, hours: offset + hours });
  }
  return knots;
}

function meanDuty(knots: readonly MeterKnot[]): number | null {
  const first = knots[0];
  const last = knots.at(-1);
  if (first === undefined || last === undefined || last.at === first.at) return null;
  const duty = (last.hours - first.hours) / (last.at - first.at);
  return duty > 0 && duty <= 24 ? duty : null;
}
