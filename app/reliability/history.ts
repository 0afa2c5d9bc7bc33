/**
 * One thing watched over one stretch of a clock, with the failures seen in it.
 *
 * The same shape serves both clocks: on the asset clock one history is one position and time is the
 * position's age since it went into service; on the life clock one history is one life and time is the
 * item's age since its last renewal. An `entry` above 0 is a late entry (left truncation): what came
 * before it was not seen and says nothing.
 *
 * Units: any, but one unit within a data set. Invariant: `0 ≤ entry < exit` and every failure lies in
 * `(entry, exit]`, in ascending order.
 */
export interface History {
  readonly entry: number;
  readonly exit: number;
  readonly failures: readonly number[];
}

/** Thrown when numbers handed to this folder break the shape its functions need. */
export class InvalidHistoryError extends Error {
  override name = 'InvalidHistoryError';
}

/**
 * Checks one history against its invariant.
 *
 * @throws InvalidHistoryError naming what is wrong and where.
 */
export function assertHistory(history: History): void {
  const { entry, exit, failures } = history;
  if (!Number.isFinite(entry) || !Number.isFinite(exit)) {
    throw new InvalidHistoryError(`entry ${entry} and exit ${exit} must be finite`);
  }
  if (entry < 0) throw new InvalidHistoryError(`entry ${entry} lies before age 0`);
  if (exit <= entry) throw new InvalidHistoryError(`exit ${exit} does not lie after entry ${entry}`);
  let previous = entry;
  for (const [index, time] of failures.entries()) {
    if (!(time > entry && time <= exit)) {
      throw new InvalidHistoryError(`failure ${index} at ${time} lies outside (${entry}, ${exit}]`);
    }
    if (time < previous) throw new InvalidHistoryError(`failure ${index} at ${time} is out of order`);
    previous = time;
  }
}

/** Number of failures in all histories together. */
export function countFailures(histories: readonly History[]): number {
  return histories.reduce((sum, history) => sum + history.failures.length, 0);
}

/** Time watched in all histories together, in their unit. */
export function totalExposure(histories: readonly History[]): number {
  return histories.reduce((sum, history) => sum + (history.exit - history.entry), 0);
}
