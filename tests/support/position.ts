import type { Position, PositionEvent, PositionEventKind } from '~/reliability/position';
import { calendarUsage } from '~/reliability/usage';

/** A position in service and watched from day 0 to day 1000 on the calendar, with what differs. */
export function aPosition(differences: Partial<Position> = {}): Position {
  return {
    id: 'position-1',
    inServiceAt: 0,
    watchFrom: 0,
    watchTo: 1000,
    fittedAt: null,
    usage: calendarUsage,
    halfResolutionDays: 0.5,
    events: [],
    ...differences,
  };
}

/** An event on a day; mode and fitted-on date where the test needs them. */
export function anEvent(
  at: number,
  kind: PositionEventKind = 'failure-renewed',
  { mode = null, itemFittedAt = null }: Partial<Pick<PositionEvent, 'mode' | 'itemFittedAt'>> = {},
): PositionEvent {
  return { at, kind, mode, itemFittedAt };
}
