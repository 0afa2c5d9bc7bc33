import type { ClockKind } from './class-evidence';

/** The unit in which ages on a clock are spoken of. */
export function clockUnit(clock: ClockKind): 'days' | 'hours' {
  return clock === 'operating-hours' ? 'hours' : 'days';
}
