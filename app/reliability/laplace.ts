import type { History } from './history';
import { normalCdf, normalUpperTail } from './special-functions';

/** Laplace's test of a trend in the rate. */
export interface LaplaceTest {
  /** N(0, 1) without a trend; above 0 where the rate rises. */
  readonly u: number;
  readonly pTwoSided: number;
  readonly pRising: number;
  readonly pFalling: number;
  readonly failures: number;
}

/**
 * Laplace's test for several positions, each with its own rate and its own window [a, b] fixed beforehand:
 * U = [ΣΣ t − Σ n (a + b)/2] / √(Σ n (b − a)²/12), conditional on the n of each position.
 *
 * @param histories one a position, on the asset clock.
 * @returns null without failures.
 *
 * Sources: Cox & Lewis 1966; Ascher & Feingold 1984; NIST/SEMATECH e-Handbook 8.2.3.4.
 */
export function laplaceTest(histories: readonly History[]): LaplaceTest | null {
  // Window by window in units of the longest one, so that neither 1e−6 nor 1e9 shows in the digits.
  const unit = histories.reduce((longest, { entry, exit }) => Math.max(longest, exit - entry), 0);
  let failures = 0;
  let deviation = 0;
  let variance = 0;
  for (const { entry, exit, failures: times } of sortedByWindow(histories)) {
    const width = (exit - entry) / unit;
    for (const time of times) deviation += (time - entry) / unit - width / 2;
    failures += times.length;
    variance += (times.length * width * width) / 12;
  }
  if (failures === 0) return null;
  const u = deviation / Math.sqrt(variance);
  return {
    u,
    pTwoSided: Math.min(1, 2 * normalUpperTail(Math.abs(u))),
    pRising: normalUpperTail(u),
    pFalling: normalCdf(u),
    failures,
  };
}

/** A fixed order of adding up, so that the order of the records does not show in the last digits. */
function sortedByWindow(histories: readonly History[]): History[] {
  const key = ({ failures }: History) => failures.reduce((sum, time) => sum + time, 0);
  return histories
    .filter(({ failures }) => failures.length > 0)
    .sort((a, b) => a.entry - b.entry || a.exit - b.exit || key(a) - key(b));
}
