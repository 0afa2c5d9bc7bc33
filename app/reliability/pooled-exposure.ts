import type { Position } from './position';
import { isFailureOf, isWatched, watchedEvents } from './watched-events';

/** One failure of the class on its pooled exposure clock. */
export interface PooledFailure {
  /** Clock units added up over all positions under watch, above 0. */
  readonly exposure: number;
  readonly at: number;
  readonly positionId: string;
  readonly mode: string | null;
}

export interface PooledExposure {
  /** In order of time; those of one moment in the order of the positions and their records. */
  readonly failures: readonly PooledFailure[];
  readonly totalExposure: number;
}

/**
 * Clock units added up over all positions inside their watches, as a function of calendar time in days.
 * Positions whose clocks run at a steady pace are summed once, at the moments when a watch opens or closes.
 */
export function pooledExposureClock(positions: readonly Position[]): (at: number) => number {
  const watched = positions.filter(isWatched);
  const paces: { at: number; change: number }[] = [];
  const unsteady: Position[] = [];
  for (const position of watched) {
    const pace = position.usage.steadyUnitsPerDay;
    if (pace === undefined) {
      unsteady.push(position);
    } else {
      paces.push({ at: position.watchFrom, change: pace }, { at: position.watchTo, change: -pace });
    }
  }
  paces.sort((a, b) => a.at - b.at || b.change - a.change);
  // Exposure and pace from each turning point on.
  const turns: { at: number; exposure: number; pace: number }[] = [];
  for (const { at, change } of paces) {
    const last = turns.at(-1);
    if (last === undefined) turns.push({ at, exposure: 0, pace: change });
    else if (last.at === at) last.pace += change;
    else turns.push({ at, exposure: last.exposure + last.pace * (at - last.at), pace: last.pace + change });
  }
  const end = turns.at(-1);
  if (end !== undefined) end.pace = 0;

  return (at) => {
    let left = -1;
    let right = turns.length;
    while (right - left > 1) {
      const middle = (left + right) >> 1;
      if (turns[middle]!.at <= at) left = middle;
      else right = middle;
    }
    const turn = turns[left];
    let sum = turn === undefined ? 0 : turn.exposure + turn.pace * (at - turn.at);
    for (const { usage, watchFrom, watchTo } of unsteady) {
      if (at > watchFrom) sum += usage.at(Math.min(at, watchTo)) - usage.at(watchFrom);
    }
    return sum;
  };
}

/**
 * The class's failures in calendar order on its pooled exposure clock.
 *
 * Failures at one moment (one day, where only the day is known) are split in the order of entry: g of them
 * are spread evenly over the exposure of the resolution that ends at that moment, the last at its end. Only
 * what came before is used, so that a later night never moves a failure. A failure before any exposure has
 * gathered is put half a resolution later.
 *
 * @param options.mode only failures of this mode; all of them unless given.
 */
export function pooledExposure(
  positions: readonly Position[],
  { mode }: { mode?: string } = {},
): PooledExposure {
  const clock = pooledExposureClock(positions);
  const raw = positions.filter(isWatched).flatMap((position) =>
    watchedEvents(position)
      .filter((event) => isFailureOf(event, mode))
      .map((event) => ({ at: event.at, mode: event.mode, position })),
  );
  raw.sort((a, b) => a.at - b.at);

  const lastWatched = positions.reduce((last, { watchTo }) => Math.max(last, watchTo), -Infinity);
  const failures: PooledFailure[] = [];
  let lastExposure = 0;
  for (let start = 0; start < raw.length;) {
    const { at } = raw[start]!;
    let end = start;
    while (end < raw.length && raw[end]!.at === at) end += 1;
    const resolution = 2 * raw[start]!.position.halfResolutionDays;
    // Never before a failure that was itself put later for want of exposure.
    const atEnd = Math.max(lastExposure, clock(at) > 0 ? clock(at) : clock(at + resolution / 2));
    const atStart = Math.max(lastExposure, clock(at - resolution));
    for (let index = start; index < end; index += 1) {
      const share = (index - start + 1) / (end - start);
      const exposure = share === 1 ? atEnd : atStart + share * (atEnd - atStart);
      const { position, mode: failedMode } = raw[index]!;
      failures.push({ exposure, at, positionId: position.id, mode: failedMode });
    }
    lastExposure = atEnd;
    start = end;
  }
  return { failures, totalExposure: Math.max(clock(lastWatched), lastExposure) };
}
