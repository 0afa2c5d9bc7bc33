import type { History } from './history';
import type { Position } from './position';
import { halfResolutionAfter, isFailureOf, isWatched, watchedEvents } from './watched-events';

/** The history of one position on the asset clock. */
export interface AssetHistory extends History {
  readonly positionId: string;
}

export interface AssetHistories {
  /** One a position that was watched while its clock ran; time is clock units since going into service. */
  readonly histories: readonly AssetHistory[];
  /** Failures at age 0 at the resolution of the record, put half a resolution later. */
  readonly zeroAges: number;
}

/**
 * Histories on the asset clock: time is usage since the position went into service, entry is the usage by
 * the opening of the watch. Failures outside the watch say nothing and are left out.
 *
 * @param options.mode only failures of this mode; all of them unless given.
 */
export function assetHistories(
  positions: readonly Position[],
  { mode }: { mode?: string } = {},
): AssetHistories {
  const histories: AssetHistory[] = [];
  let zeroAges = 0;
  for (const position of positions) {
    if (!isWatched(position)) continue;
    const { id, usage, inServiceAt, watchFrom, watchTo } = position;
    const zero = usage.at(inServiceAt);
    const entry = usage.at(watchFrom) - zero;
    const failures = watchedEvents(position)
      .filter((event) => isFailureOf(event, mode))
      .map(({ at }) => {
        const age = usage.at(at) - zero;
        if (age > entry) return age;
        if (entry === 0) zeroAges += 1;
        return entry + halfResolutionAfter(position, at);
      })
      .sort((a, b) => a - b);
    const exit = Math.max(usage.at(watchTo) - zero, failures.at(-1) ?? 0);
    if (exit > entry) histories.push({ positionId: id, entry, exit, failures });
  }
  return { histories, zeroAges };
}
