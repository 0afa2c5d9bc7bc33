/** What a meter reading is checked against. Days are 'YYYY-MM-DD' in the organisation's zone. */
export interface ServiceDates {
  readonly inServiceOn: string;
  readonly retiredOn: string | null;
}

/** What a meter showed on a day. */
export interface ShownHours {
  readonly readOn: string;
  readonly hours: number;
  /** Whether it is the first reading of a new meter. */
  readonly meterChanged: boolean;
}

/** The readings that count, nearest in time to another one of the same asset. */
export interface Neighbours {
  readonly before: ShownHours | null;
  readonly sameDay: ShownHours | null;
  readonly after: ShownHours | null;
}

/** Why a reading cannot be stored, put back or taken away as things stand. */
export type ReadingRefusal =
  | { readonly code: 'unknown-asset' }
  | { readonly code: 'id-taken' }
  | { readonly code: 'in-future' }
  | { readonly code: 'before-service'; readonly day: string }
  | { readonly code: 'after-retirement'; readonly day: string }
  | { readonly code: 'same-day'; readonly other: ShownHours }
  /** It goes back against an earlier reading. */
  | { readonly code: 'below-earlier'; readonly other: ShownHours }
  /** A later reading of the same meter would go back against it. */
  | { readonly code: 'above-later'; readonly other: ShownHours }
  /** More hours since, or before, the other reading than the days between them have. */
  | { readonly code: 'too-fast'; readonly other: ShownHours }
  /** Without it, the reading after it would go back against the one before. */
  | { readonly code: 'needed'; readonly other: ShownHours };

const hoursADay = 24;
const dayMilliseconds = 86_400_000;

/**
 * The first thing that makes a reading impossible beside the asset's dates and its other readings, or null.
 *
 * @param today the day it is.
 */
export function refuseReading(
  asset: ServiceDates,
  reading: ShownHours,
  { before, sameDay, after }: Neighbours,
  today: string,
): ReadingRefusal | null {
  const { readOn, hours, meterChanged } = reading;
  if (readOn > today) return { code: 'in-future' };
  if (readOn < asset.inServiceOn) return { code: 'before-service', day: asset.inServiceOn };
  if (asset.retiredOn !== null && readOn > asset.retiredOn) {
    return { code: 'after-retirement', day: asset.retiredOn };
  }
  if (sameDay) return { code: 'same-day', other: sameDay };
  if (before && !meterChanged) {
    if (before.hours > hours) return { code: 'below-earlier', other: before };
    if (isTooFast(before, reading)) return { code: 'too-fast', other: before };
  }
  if (after && !after.meterChanged) {
    if (after.hours < hours) return { code: 'above-later', other: after };
    if (isTooFast(reading, after)) return { code: 'too-fast', other: after };
  }
  return null;
}

/** Whether a reading may be taken away from between its neighbours; the reason why not otherwise. */
export function refuseVoid({ before, after }: Pick<Neighbours, 'before' | 'after'>): ReadingRefusal | null {
  const goesBack = before && after && !after.meterChanged && before.hours > after.hours;
  return goesBack ? { code: 'needed', other: after } : null;
}

/** Read at the start of the first day and at the end of the last, the meter has had all hours of both. */
function isTooFast(earlier: ShownHours, later: ShownHours): boolean {
  const days = (Date.parse(later.readOn) - Date.parse(earlier.readOn)) / dayMilliseconds + 1;
  return later.hours - earlier.hours > days * hoursADay;
}
