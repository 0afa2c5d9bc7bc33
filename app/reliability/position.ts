import type { Usage } from './usage';

/**
 * What one record does to a position's clocks (methods: from records to histories).
 *
 * - `failure-renewed`: a failure; the life ends and a new item starts at age 0.
 * - `failure-patched`: a failure; the same item goes on at the same age.
 * - `planned-renewal`: no failure; the life is cut short (right-censored); a new item starts at age 0.
 * - `other-renewal`: no failure of this kind, but the item was renewed (outside cause, another failure
 *   mode): the life is censored there; a new item starts at age 0.
 *
 * Records that touch neither clock (inspections, voided records, an outside cause that was patched) do
 * not appear here at all.
 */
export type PositionEventKind = 'failure-renewed' | 'failure-patched' | 'planned-renewal' | 'other-renewal';

export interface PositionEvent {
  /** Calendar time in days on the data set's own day count; fractions where the time of day is known. */
  readonly at: number;
  readonly kind: PositionEventKind;
  /** Failure mode, or null when none was recorded. Only failures carry one. */
  readonly mode: string | null;
  /**
   * When the failed or replaced item had been fitted, on the same day count, if the record names it.
   * It dates the life that this event ends when nothing else does.
   */
  readonly itemFittedAt: number | null;
}

/** One place where one item of a class sits, with all that was recorded there. */
export interface Position {
  readonly id: string;
  /** Zero of the asset clock: when the position went into service. */
  readonly inServiceAt: number;
  /** The watch: nothing outside `(watchFrom, watchTo]` was recorded reliably. `watchFrom ≥ inServiceAt`. */
  readonly watchFrom: number;
  readonly watchTo: number;
  /**
   * When the item in place at `watchFrom` had been fitted, if known; null when not. A watch that opens
   * on the day of going into service starts with an item of age 0 whatever this says.
   */
  readonly fittedAt: number | null;
  /** Turns calendar days into clock units (days or operating hours). */
  readonly usage: Usage;
  /** Half the resolution of the record in days: 0.5 when dates only, smaller with times of day. */
  readonly halfResolutionDays: number;
  /** In order of time; events on one day in the order of entry. */
  readonly events: readonly PositionEvent[];
}
