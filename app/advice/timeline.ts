export const timelineKinds = ['failure-renewed', 'failure-patched', 'outside', 'renewal', 'visit'] as const;
export type TimelineKind = (typeof timelineKinds)[number];

/** What happened at one place; ISO calendar dates. */
export interface TimelineEvent {
  readonly day: string;
  readonly kind: TimelineKind;
}

export interface Timeline {
  /** When records of the place begin and end. */
  readonly from: string;
  readonly to: string;
  readonly events: readonly TimelineEvent[];
}
