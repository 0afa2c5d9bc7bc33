/** Below this a figure is rather a share typed for a percentage than an aim anybody has. */
const lowestPercent = 50;

/** Steps of a thousandth of a percent, as finely as an availability is kept. */
const steps = 100_000;

/**
 * Reads an availability written as a percentage with up to three decimals, after a point or a comma.
 *
 * @returns the share it stands for, or undefined for what is no percentage from 50 to 99.999.
 */
export function parseAvailability(text: string): number | undefined {
  const match = /^(\d{1,2})(?:[.,](\d{1,3}))?\s*%?$/.exec(text.trim());
  if (!match) return undefined;
  const [, whole = '', decimals = ''] = match;
  const thousandths = Number(whole + decimals.padEnd(3, '0'));
  return thousandths < lowestPercent * 1000 ? undefined : thousandths / steps;
}

/** A share as the form field holds it, so that {@link parseAvailability} reads back the same: 0.995 is "99.5". */
export function availabilityFieldText(share: number): string {
  return String(Math.round(share * steps) / 1000);
}
