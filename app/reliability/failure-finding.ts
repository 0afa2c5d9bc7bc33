/**
 * Failure-finding interval of a hidden function with a constant rate: tested every T, found and put right
 * at the test, its mean availability is A(T) = (1 − e^(−T/θ))/(T/θ), θ the mean time to failure.
 * Source: Nowlan & Heap 1978; the formula by integrating e^(−t/θ) over [0, T].
 *
 * Statutory test intervals always come first.
 */

/** Mean availability at a test interval; both in one clock unit, above 0. */
export function meanAvailability(interval: number, meanTimeToFailure: number): number {
  return availabilityAtRatio(interval / meanTimeToFailure);
}

/**
 * Longest test interval that still gives the mean availability asked for, in the unit of
 * `meanTimeToFailure`. Solved by Newton's method on the strictly falling A(T).
 *
 * @param availability in (0, 1).
 * @throws RangeError outside that, or for a mean time to failure that is not above 0.
 */
export function failureFindingInterval(availability: number, meanTimeToFailure: number): number {
  checkArguments(availability, meanTimeToFailure);
  // A is convex and falling, so from a point left of the root Newton's steps approach it from the left.
  let ratio = 2 * (1 - availability);
  for (let step = 0; step < 100; step += 1) {
    const value = availabilityAtRatio(ratio);
    const derivative = ratio < 1e-3 ? -0.5 + ratio / 3 : (Math.exp(-ratio) - value) / ratio;
    const next = ratio - (value - availability) / derivative;
    if (Math.abs(next - ratio) <= 1e-15 * next) return next * meanTimeToFailure;
    ratio = next;
  }
  return ratio * meanTimeToFailure;
}

/** The rule of thumb T ≈ 2(1 − A)θ, always on the short side of the exact interval. */
export function approximateFailureFindingInterval(availability: number, meanTimeToFailure: number): number {
  checkArguments(availability, meanTimeToFailure);
  return 2 * (1 - availability) * meanTimeToFailure;
}

function availabilityAtRatio(ratio: number): number {
  return ratio === 0 ? 1 : -Math.expm1(-ratio) / ratio;
}

function checkArguments(availability: number, meanTimeToFailure: number): void {
  if (!(availability > 0 && availability < 1))
    throw new RangeError(`availability ${availability} is not in (0, 1)`);
  if (!(meanTimeToFailure > 0 && meanTimeToFailure < Infinity)) {
    throw new RangeError(`mean time to failure ${meanTimeToFailure} is not above 0`);
  }
}
