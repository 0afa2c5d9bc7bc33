/**
 * A position's running clock: clock units (days or operating hours) as a monotone function of calendar
 * time in days. Only differences of its values mean anything.
 */
export interface Usage {
  /** Clock reading at calendar time `at` (days). Non-decreasing. */
  readonly at: (at: number) => number;
  /** Clock units a day, where the clock runs evenly for ever; absent where it does not. */
  readonly steadyUnitsPerDay?: number;
}

/** The calendar itself: one unit a day. */
export const calendarUsage: Usage = { at: (at) => at, steadyUnitsPerDay: 1 };

/**
 * A steady duty.
 *
 * @param hoursPerDay operating hours a calendar day, above 0 and at most 24.
 * @throws RangeError for a duty outside (0, 24].
 */
export function dutyUsage(hoursPerDay: number): Usage {
  assertDuty(hoursPerDay);
  return { at: (at) => at * hoursPerDay, steadyUnitsPerDay: hoursPerDay };
}

/** One reading of an hour meter. Meter changes are joined up beforehand: readings only ever grow. */
export interface MeterKnot {
  /** Calendar time in days. */
  readonly at: number;
  /** Operating hours added up since any fixed moment. */
  readonly hours: number;
}

/**
 * Operating hours from meter readings: straight lines between readings (monotone, since the readings are),
 * the duty before the first and after the last, and the duty alone where there is no reading.
 *
 * @param knots readings in order of time; two at one moment keep the later-listed one out.
 * @param fallbackHoursPerDay duty outside the readings, in (0, 24].
 * @throws RangeError for a duty outside (0, 24], or readings out of order or going back.
 */
export function meteredUsage(knots: readonly MeterKnot[], fallbackHoursPerDay: number): Usage {
  assertDuty(fallbackHoursPerDay);
  const kept: MeterKnot[] = [];
  for (const knot of knots) {
    const last = kept.at(-1);
    if (last !== undefined) {
      if (!(knot.at >= last.at)) throw new RangeError(`the reading at ${knot.at} is out of order`);
      if (!(knot.hours >= last.hours))
        throw new RangeError(`the reading ${knot.hours} at ${knot.at} goes back`);
      if (knot.at === last.at) continue;
    }
    kept.push(knot);
  }
  const first = kept[0];
  const last = kept.at(-1);
  if (first === undefined || last === undefined) return dutyUsage(fallbackHoursPerDay);
  const at = (time: number): number => {
    if (time <= first.at) return first.hours - (first.at - time) * fallbackHoursPerDay;
    if (time >= last.at) return last.hours + (time - last.at) * fallbackHoursPerDay;
    let left = 0;
    let right = kept.length - 1;
    while (right - left > 1) {
      const middle = (left + right) >> 1;
      if (kept[middle]!.at <= time) left = middle;
      else right = middle;
    }
    const before = kept[left]!;
    const after = kept[right]!;
    const share = (time - before.at) / (after.at - before.at);
    return before.hours + share * (after.hours - before.hours);
  };
  return { at };
}

function assertDuty(hoursPerDay: number): void {
  if (!(hoursPerDay > 0 && hoursPerDay <= 24)) {
    throw new RangeError(`a duty of ${hoursPerDay} hours a day is not in (0, 24]`);
  }
}
