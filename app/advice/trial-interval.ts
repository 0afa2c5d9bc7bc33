import type { ClockKind } from './class-evidence';
import { practicableInterval } from './practicable-interval';

/** How much further a trial goes than what the schedule lets be seen (common practice, no source). */
const trialStretch = 1.5;

/** A change smaller than this share of today's interval is none. */
export const smallChange = 0.1;

/**
 * The longer interval to try on a part of a class whose schedule hides what lies beyond it: one and a half
 * times the age up to which anything was seen, as it can be kept. Null where nothing is hidden, nothing is
 * scheduled, or that is no real step beyond today's interval. The idea of age exploration: Nowlan & Heap 1978.
 */
export function trialInterval(
  maskedAge: number | null,
  currentInterval: number | null,
  clock: ClockKind,
): number | null {
  if (maskedAge === null || currentInterval === null || !(maskedAge > 0)) return null;
  const interval = practicableInterval(trialStretch * maskedAge, clock);
  return interval > currentInterval * (1 + smallChange) ? interval : null;
}
