import type { Position } from '~/reliability/position';

export type ClockKind = 'calendar-days' | 'operating-hours';

/** A record that took no part, and why: shown under "what it rests on" instead of being lost silently. */
export const leftOutReasons = [
  'voided',
  'outside-cause',
  'before-watch',
  'after-watch',
  'inspection',
  'no-duty',
] as const;
export type LeftOutReason = (typeof leftOutReasons)[number];

/** Where a position is and what it is called there. */
export interface Place {
  readonly tag: string;
  readonly siteId: string;
  readonly siteName: string;
}

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
  /** Nobody notices a failure until it is looked for. */
  readonly hiddenFailures: boolean;
  /** Money in minor units; null where nobody has said. */
  readonly costs: {
    readonly plannedMinor: number | null;
    readonly failureMinor: number | null;
    readonly groupPlannedMinor: number | null;
  };
  readonly sparesLeadTimeDays: number | null;
  /** Share of lead times in which the spares held are to be enough, in (0, 1). */
  readonly serviceLevel: number;
  /** Mean availability a hidden function is to have. */
  readonly requiredAvailability: number | null;
  /** The renewing schedule in force, its interval in clock units; null where items run to failure. */
  readonly currentTask: { readonly name: string; readonly interval: number } | null;
  /** Clock units one position runs in a year. */
  readonly clockUnitsAYear: number;
  /** End of the watch: the start of the day after the last complete one. */
  readonly now: number;
  readonly positions: readonly Position[];
  /** Items of quantity assets whose ages cannot be told apart: they count for the first question only. */
  readonly rateOnlyPositions: readonly Position[];
  /** Positions whose operating hours come from an assumed duty, not from a meter. */
  readonly positionsWithAssumedClock: number;
  readonly places: ReadonlyMap<string, Place>;
  /** When planned visits that renewed nothing came to a position: inspections, services, tests. */
  readonly visits: ReadonlyMap<string, readonly number[]>;
  /** What stands for several items at once. */
  readonly groups: {
    readonly assets: number;
    readonly items: number;
    readonly itemsOfUnknownAge: number;
    readonly failures: number;
    /** Failures of which nobody can say how old the failed item was. */
    readonly undatedFailures: number;
  };
  readonly modes: readonly { readonly id: string; readonly name: string }[];
  readonly leftOut: readonly { readonly reason: LeftOutReason; readonly count: number }[];
}
