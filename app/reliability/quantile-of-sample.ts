/**
 * Quantile of a list by linear interpolation between order statistics (Hyndman & Fan 1996, definition 7).
 * Values may be Infinity; between a finite value and Infinity the result is Infinity.
 *
 * @param sorted ascending, at least one value.
 */
export function quantileOfSample(sorted: readonly number[], p: number): number {
  const position = (sorted.length - 1) * p;
  const low = Math.floor(position);
  const below = sorted[low] ?? NaN;
  const share = position - low;
  if (share === 0) return below;
  const above = sorted[low + 1] ?? below;
  return above === Infinity ? Infinity : below + share * (above - below);
}
