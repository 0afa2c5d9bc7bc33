import { lifeChain } from '~/reliability/life-chain';
import type { Position } from '~/reliability/position';

/** What stands in its place on a day: the ages of the items, and how fast their clocks run. */
export interface ItemsInPlace {
  /** Positions under watch on that day. */
  readonly positions: readonly Position[];
  /** Ages in clock units, of the items whose fitting is known. */
  readonly ages: readonly number[];
  readonly agesUnknown: number;
}

/** @param now day number; positions whose watch ended before it are no longer in service. */
export function itemsInPlace(positions: readonly Position[], now: number): ItemsInPlace {
  const inService = positions.filter(({ watchFrom, watchTo }) => watchTo >= now && watchFrom < watchTo);
  const ages: number[] = [];
  let agesUnknown = 0;
  for (const position of inService) {
    const last = lifeChain(position).lives.at(-1);
    // An item renewed at the very end of the watch has no life in the chain yet: it is new.
    const fittedAt = last === undefined || last.endedBy !== 'watch-end' ? position.watchTo : last.fittedAt;
    if (fittedAt === null) agesUnknown += 1;
    else ages.push(Math.max(0, position.usage.at(now) - position.usage.at(fittedAt)));
  }
  return { positions: inService, ages, agesUnknown };
}

/** Clock units all positions together run through in so many days from `now`, at the pace of their clocks. */
export function exposureToCome({ positions }: ItemsInPlace, now: number, days: number): number {
  return positions.reduce((sum, { usage }) => sum + (usage.at(now + days) - usage.at(now)), 0);
}
