/** A visit counts as kept when it comes within this share of the interval of its due day (common practice, no source). */
export const keptWithin = 0.1;

/** How well one schedule has been kept. Counts of visits that were due, and of those overdue today. */
export interface ScheduleKeeping {
  readonly due: number;
  readonly kept: number;
  readonly early: number;
  readonly late: number;
  /** Assets whose visit should have come by now, the tenth of the interval over. */
  readonly overdue: number;
}

export interface KeptAsset {
  /** Days on which the interval began anew before and during the watch, ascending: planned work, and renewals by failure. */
  readonly starts: readonly number[];
  /** Days of planned work, ascending. */
  readonly done: readonly number[];
  /** The watch, and the part of it in which the schedule was in force: day numbers. */
  readonly from: number;
  readonly to: number;
}

/**
 * Compares when planned work was done with when it was due: an interval after the last time that work was done or, for
 * work that renews, the item was renewed by a failure. The first visit of an asset is due nowhere: nobody knows from when.
 *
 * @param interval days, above 0.
 */
export function scheduleKeeping(assets: readonly KeptAsset[], interval: number): ScheduleKeeping {
  const slack = keptWithin * interval;
  let [kept, early, late, overdue] = [0, 0, 0, 0];
  for (const { starts, done, from, to } of assets) {
    for (const day of done) {
      if (day < from || day >= to) continue;
      const start = lastBefore(starts, day);
      if (start === undefined) continue;
      const off = day - (start + interval);
      if (off < -slack) early += 1;
      else if (off > slack) late += 1;
      else kept += 1;
    }
    const last = lastBefore(starts, to);
    if (last !== undefined && to > last + interval + slack) overdue += 1;
  }
  return { due: kept + early + late, kept, early, late, overdue };
}

function lastBefore(days: readonly number[], day: number): number | undefined {
  return days.findLast((one) => one < day);
}
