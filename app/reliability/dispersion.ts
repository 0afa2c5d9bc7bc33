import { binomialAtLeast } from './binomial-tail';
import { chiSquaredUpperTail } from './special-functions';
import type { CountInExposure } from './two-rates';

/** A position with more failures than its share of the exposure explains. */
export interface StickingOut {
  /** Place in the list given. */
  readonly index: number;
  readonly failures: number;
  /** Failures its share of the exposure leads to expect. */
  readonly expected: number;
  /** P(at least as many), exact binomial given the total. */
  readonly p: number;
  /** p times the number of positions, at most 1 (Bonferroni). */
  readonly adjustedP: number;
}

export interface Dispersion {
  readonly positions: number;
  readonly failures: number;
  /** X² = Σ (observed − expected)²/expected. */
  readonly statistic: number;
  readonly degreesOfFreedom: number;
  /** Chance of counts at least as uneven if every position failed at one rate. */
  readonly p: number;
  /** Positions whose adjusted p is below the level asked for, worst first. */
  readonly stickingOut: readonly StickingOut[];
}

/**
 * Whether counts per position are more uneven than one Poisson rate allows: Fisher's index of dispersion
 * (chi-squared on positions − 1 degrees of freedom), conditional on the total, expectations in proportion
 * to exposure. With few failures a position the chi-squared law is off; its scale and degrees of freedom
 * are matched to the exact mean m − 1 and variance of X² under the multinomial,
 * 2(m−1) + [Σ 1/p − m² − 2m + 2]/n (Haldane 1937).
 * Source: Fisher 1950; Haldane 1937.
 *
 * Positions without exposure and without failures are left out.
 *
 * @param level for naming positions, after Bonferroni.
 * @returns null with no failure or fewer than 2 positions.
 * @throws RangeError when a position without exposure has failures.
 */
export function dispersion(counts: readonly CountInExposure[], level: number): Dispersion | null {
  let failures = 0;
  let exposure = 0;
  let positions = 0;
  for (const count of counts) {
    if (!(count.exposure >= 0 && count.exposure < Infinity)) throw new RangeError('an exposure is below 0');
    if (count.exposure === 0 && count.failures > 0) throw new RangeError('failures without exposure');
    failures += count.failures;
    exposure += count.exposure;
    if (count.exposure > 0) positions += 1;
  }
  if (failures === 0 || positions < 2) return null;

  let statistic = 0;
  let inverseShares = 0;
  const stickingOut: StickingOut[] = [];
  counts.forEach((count, index) => {
    if (count.exposure === 0) return;
    const share = count.exposure / exposure;
    const expected = failures * share;
    statistic += (count.failures - expected) ** 2 / expected;
    inverseShares += 1 / share;
    if (count.failures <= expected) return;
    const p = binomialAtLeast(count.failures, failures, share);
    const adjustedP = Math.min(1, p * positions);
    if (adjustedP < level) stickingOut.push({ index, failures: count.failures, expected, p, adjustedP });
  });
  stickingOut.sort((a, b) => a.p - b.p || a.index - b.index);
  return {
    positions,
    failures,
    statistic,
    degreesOfFreedom: positions - 1,
    p: matchedUpperTail(statistic, positions, failures, inverseShares),
    stickingOut,
  };
}

function matchedUpperTail(statistic: number, m: number, n: number, inverseShares: number): number {
  const mean = m - 1;
  const variance = 2 * mean + (inverseShares - m * m - 2 * m + 2) / n;
  // With one failure and equal exposures X² can take one value only.
  if (!(variance > 1e-9 * mean)) return 1;
  return chiSquaredUpperTail((2 * mean * statistic) / variance, (2 * mean * mean) / variance);
}
