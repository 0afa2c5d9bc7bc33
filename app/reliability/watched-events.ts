import type { Position, PositionEvent } from './position';

/** Whether a position was watched for any time at all. */
export function isWatched({ watchFrom, watchTo }: Position): boolean {
  return watchTo > watchFrom;
}

/**
 * The events inside the watch `(watchFrom, watchTo]`, in order. A watch that opens on going into service
 * takes in its first moment as well: nothing can have come before it.
 */
export function watchedEvents(position: Position): PositionEvent[] {
  const { events, inServiceAt, watchFrom, watchTo } = position;
  return events.filter(
    ({ at }) => at <= watchTo && (at > watchFrom || (at === watchFrom && watchFrom === inServiceAt)),
  );
}

/** Whether an event is a failure of the kind asked for: any mode, or one. */
export function isFailureOf({ kind, mode }: PositionEvent, wanted: string | undefined): boolean {
  const failed = kind === 'failure-renewed' || kind === 'failure-patched';
  return failed && (wanted === undefined || mode === wanted);
}

/** Whether an event puts a new item in place. */
export function isRenewal({ kind }: PositionEvent): boolean {
  return kind !== 'failure-patched';
}

/** A clock time just after `origin`: half the record's resolution later, or that many units if the clock stood still. */
export function halfResolutionAfter(position: Position, at: number): number {
  const { usage, halfResolutionDays } = position;
  const advance = usage.at(at + halfResolutionDays) - usage.at(at);
  return advance > 0 ? advance : halfResolutionDays;
}
