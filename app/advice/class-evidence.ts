import type { Position } from '~/reliability/position';

export type ClockKind = 'calendar-days' | 'operating-hours';

/** A record that took no part, and why: shown under "what it rests on" instead of being lost silently. */
export const leftOutReasons = [
  'voided',
  'outside-cause',
  'before-watch',
  'after-watch',
  'group-asset',
  'inspection',
  'no-duty',
] as const;
export type LeftOutReason = (typeof leftOutReasons)[number];

/**
 * All that is known about one asset class on the night: what an assessment is made from.
 *
 * Times are day numbers (days since 1970-01-01 in the organisation's zone, fractions where the time of
 * day is known); ages and exposures come out in the class's clock unit.
 */
export interface ClassEvidence {
  readonly itemSingular: string;
  readonly itemPlural: string;
  readonly clock: ClockKind;
  readonly statutory: boolean;
  readonly endangersPeople: boolean;
  /** End of the watch: the start of the day after the last complete one. */
  readonly now: number;
  readonly positions: readonly Position[];
  /** Positions whose operating hours come from an assumed duty, not from a meter. */
  readonly positionsWithAssumedClock: number;
  readonly modes: readonly { readonly id: string; readonly name: string }[];
  readonly leftOut: readonly { readonly reason: LeftOutReason; readonly count: number }[];
}
