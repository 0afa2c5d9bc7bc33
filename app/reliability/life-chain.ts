import type { Position, PositionEvent } from './position';
import { isRenewal, isWatched, watchedEvents } from './watched-events';

/** What ended a life. */
export type LifeEnd = 'failure' | 'planned-renewal' | 'other-renewal' | 'unrecorded-renewal' | 'watch-end';

/** One life of an item at one position, on the calendar. */
export interface Life {
  /** When the item was fitted; null when nothing tells. */
  readonly fittedAt: number | null;
  /** Watched over `(from, to]`; `from` equals `fittedAt` unless the life was under way when the watch opened. */
  readonly from: number;
  readonly to: number;
  readonly endedBy: LifeEnd;
  /** All failures of this item, the one that ended it included, of whatever mode. */
  readonly failures: readonly PositionEvent[];
  /** Whether only the record of a failure or renewal told when the item had been fitted. */
  readonly datedByRecord: boolean;
}

/** The lives at one position, in order. */
export interface LifeChain {
  readonly lives: readonly Life[];
  /** Records whose fitted-on date cannot be true beside the others; the other records were followed. */
  readonly conflictingDates: number;
}

/**
 * Lays out the lives at one position.
 *
 * The first life is dated by going into service if the watch opens then, else by the latest renewal
 * recorded before the watch or the known fitted-on date, else by the record of an event in that life that
 * names when its item had been fitted. A renewal starts the next life at age 0. A fitted-on date later
 * than the known start means a renewal that nobody recorded: the old life ends there, unfailed, and a new
 * one starts. A date earlier than the known start, or later than the event that names it, contradicts the
 * records: it is counted and not followed. Dates less than twice the half resolution apart are the same.
 */
export function lifeChain(position: Position): LifeChain {
  if (!isWatched(position)) return { lives: [], conflictingDates: 0 };
  const { watchFrom, watchTo, halfResolutionDays } = position;
  const lives: Life[] = [];
  let conflictingDates = 0;

  const first = firstFitting(position);
  if (first.conflicts) conflictingDates += 1;
  let fittedAt = first.fittedAt;
  let datedByRecord = false;
  let from = watchFrom;
  let failures: PositionEvent[] = [];

  const close = (to: number, endedBy: LifeEnd, own: PositionEvent[]) => {
    lives.push({ fittedAt, from, to, endedBy, failures: own, datedByRecord });
  };
  const open = (at: number, own: PositionEvent[], byRecord: boolean) => {
    fittedAt = at;
    from = Math.max(at, watchFrom);
    failures = own;
    datedByRecord = byRecord;
  };

  for (const event of watchedEvents(position)) {
    const named = event.itemFittedAt;
    if (named !== null && named > event.at) {
      conflictingDates += 1;
    } else if (named !== null && fittedAt !== null && named <= fittedAt - 2 * halfResolutionDays) {
      conflictingDates += 1;
    } else if (named !== null && (fittedAt === null || named >= fittedAt + 2 * halfResolutionDays)) {
      const later = failures.filter(({ at }) => at > named);
      if (named > from) {
        const earlier = failures.filter(({ at }) => at <= named);
        close(named, 'unrecorded-renewal', earlier);
        open(named, later, true);
      } else {
        open(named, failures, true);
      }
    }
    if (event.kind === 'failure-renewed' || event.kind === 'failure-patched') failures.push(event);
    if (isRenewal(event)) {
      close(event.at, event.kind === 'failure-renewed' ? 'failure' : endOf(event), failures);
      open(event.at, [], false);
    }
  }
  if (watchTo > from) close(watchTo, 'watch-end', failures);
  return { lives, conflictingDates };
}

function endOf({ kind }: PositionEvent): LifeEnd {
  return kind === 'planned-renewal' ? 'planned-renewal' : 'other-renewal';
}

/** When the item in place at the opening of the watch had been fitted, as far as is known beforehand. */
function firstFitting(position: Position): { fittedAt: number | null; conflicts: boolean } {
  const { inServiceAt, watchFrom, fittedAt, events } = position;
  if (watchFrom === inServiceAt) return { fittedAt: inServiceAt, conflicts: false };
  const before = events.filter((event) => isRenewal(event) && event.at <= watchFrom).map(({ at }) => at);
  const lastRenewal = before.length > 0 ? Math.max(...before) : null;
  if (fittedAt === null) return { fittedAt: lastRenewal, conflicts: false };
  if (fittedAt > watchFrom) return { fittedAt: lastRenewal, conflicts: true };
  return { fittedAt: lastRenewal === null ? fittedAt : Math.max(fittedAt, lastRenewal), conflicts: false };
}
