import type { Position, PositionEvent } from '~/reliability/position';

/** A record of a quantity asset that touches its clocks, in order of time and of entry. */
export interface GroupEvent extends PositionEvent {
  /** How many items a planned renewal took; null for all of them. One for everything else. */
  readonly items: number | null;
}

/** A quantity asset: interchangeable items of which nobody notes who sits where. */
export interface Group {
  readonly id: string;
  readonly quantity: number;
  /** How many of the items in place when the watch opened had been fitted when; the rest is unknown. */
  readonly fitted: readonly { readonly at: number; readonly count: number }[];
  readonly frame: Omit<Position, 'id' | 'fittedAt' | 'events'>;
  readonly events: readonly GroupEvent[];
}

export interface LaidOutGroup {
  readonly positions: readonly Position[];
  /** Whether every life that ended can be told from the others; if not, only the class's rate can be judged. */
  readonly agesKnown: boolean;
  /** Items whose age was not known when the watch opened; all of them where lives cannot be told apart. */
  readonly itemsOfUnknownAge: number;
  readonly failures: number;
  /** Failures of which nobody can say how old the failed item was. */
  readonly undatedFailures: number;
}

interface Socket {
  fittedAt: number | null;
  readonly firstFittedAt: number | null;
  readonly events: PositionEvent[];
}

/** Two fitting dates closer than this are the same day. */
const sameDay = 1;

/**
 * Lays a quantity asset out as single positions by keeping the multiset of fitted-on dates.
 *
 * A failure that names the fitted-on date of the failed item ends a life that began then; which of several
 * such items it was makes no difference. Where all items in place are of one age, it need not name it.
 * Otherwise its life cannot be told from the others: the failure still counts for the rate, at a place
 * taken in turn, and `agesKnown` is false.
 */
export function layOutGroup({ id, quantity, fitted, frame, events }: Group): LaidOutGroup {
  const sockets = socketsOf(quantity, fitted, frame);
  let failures = 0;
  let undatedFailures = 0;
  let undatedRenewals = 0;
  let turn = 0;

  for (const { items, ...event } of events) {
    if (isFailure(event) && event.at > frame.watchFrom) failures += 1;
    if (event.kind === 'planned-renewal' && (items === null || items >= quantity)) {
      for (const socket of sockets) renew(socket, event);
      continue;
    }
    for (let taken = 0; taken < (items ?? 1); taken += 1) {
      const named = socketFor(sockets, event.itemFittedAt);
      if (named === null) {
        if (isFailure(event)) undatedFailures += 1;
        else undatedRenewals += 1;
      }
      const socket = named ?? sockets[turn++ % quantity]!;
      renew(socket, event);
    }
  }

  const agesKnown = undatedFailures + undatedRenewals === 0;
  return {
    positions: sockets.map((socket, index) => ({
      ...frame,
      id: `${id}#${index + 1}`,
      fittedAt: socket.firstFittedAt,
      events: agesKnown ? socket.events : failuresOnly(socket.events),
    })),
    agesKnown,
    itemsOfUnknownAge: agesKnown
      ? sockets.filter(({ firstFittedAt }) => firstFittedAt === null).length
      : quantity,
    failures,
    undatedFailures,
  };
}

/** Where nobody can tell which life ended, a failure still counts and a renewal says nothing. */
function failuresOnly(events: readonly PositionEvent[]): PositionEvent[] {
  return events.filter(isFailure).map((event) => ({ ...event, kind: 'failure-patched', itemFittedAt: null }));
}

function isFailure({ kind }: PositionEvent): boolean {
  return kind === 'failure-renewed' || kind === 'failure-patched';
}

function socketsOf(
  quantity: number,
  fitted: Group['fitted'],
  { inServiceAt, watchFrom }: Group['frame'],
): Socket[] {
  const dates: (number | null)[] =
    watchFrom === inServiceAt
      ? Array.from({ length: quantity }, () => inServiceAt)
      : fitted.flatMap(({ at, count }) => Array.from({ length: count }, () => at)).slice(0, quantity);
  while (dates.length < quantity) dates.push(null);
  return dates.map((fittedAt) => ({ fittedAt, firstFittedAt: fittedAt, events: [] }));
}

function renew(socket: Socket, event: PositionEvent): void {
  socket.events.push(event);
  if (event.kind !== 'failure-patched') socket.fittedAt = event.at;
}

/** A place that holds an item fitted on that day, or any place while all items are of one known age. */
function socketFor(sockets: readonly Socket[], fittedAt: number | null): Socket | null {
  if (fittedAt !== null) {
    const known = sockets.find(
      (socket) => socket.fittedAt !== null && Math.abs(socket.fittedAt - fittedAt) < sameDay,
    );
    return known ?? sockets.find((socket) => socket.fittedAt === null) ?? null;
  }
  const first = sockets[0]!.fittedAt;
  const allAlike = first !== null && sockets.every((socket) => socket.fittedAt === first);
  return allAlike ? sockets[0]! : null;
}
