import type { History } from './history';
import { chiSquaredCdf, chiSquaredUpperTail } from './special-functions';

/** The military-handbook test of a trend in the rate. */
export interface MilitaryHandbookTest {
  /** Chi-squared on `degreesOfFreedom` without a trend; small where the rate rises. */
  readonly x: number;
  readonly degreesOfFreedom: number;
  readonly pTwoSided: number;
  readonly pRising: number;
  readonly pFalling: number;
  readonly failures: number;
}

/**
 * X = 2 ΣΣ ln((b − a)/(t − a)) over positions with windows [a, b], on 2N degrees of freedom for N failures.
 *
 * @param histories one a position, on the asset clock.
 * @returns null without failures.
 *
 * Sources: MIL-HDBK-189 (1981); NIST/SEMATECH e-Handbook 8.2.3.4.
 */
export function militaryHandbookTest(histories: readonly History[]): MilitaryHandbookTest | null {
  const terms = Float64Array.from(
    histories.flatMap(({ entry, exit, failures }) =>
      failures.map((time) => Math.log((exit - entry) / (time - entry))),
    ),
  ).sort();
  if (terms.length === 0) return null;
  const x = 2 * terms.reduce((sum, term) => sum + term, 0);
  const degreesOfFreedom = 2 * terms.length;
  const pRising = chiSquaredCdf(x, degreesOfFreedom);
  const pFalling = chiSquaredUpperTail(x, degreesOfFreedom);
  return {
    x,
    degreesOfFreedom,
    pTwoSided: Math.min(1, 2 * Math.min(pRising, pFalling)),
    pRising,
    pFalling,
    failures: terms.length,
  };
}
