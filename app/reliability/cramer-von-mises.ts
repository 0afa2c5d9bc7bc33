import { countFailures, type History } from './history';

/**
 * Critical values of C²_M at the 5 % level by number of failures M, from Crow 1975 as printed in
 * MIL-HDBK-189 (1981), Table of critical values for the Cramér–von Mises test; typed from memory and
 * held against simulation in the tests.
 */
const criticalAtFivePercent: readonly (readonly [number, number])[] = [
  [2, 0.175],
  [3, 0.184],
  [4, 0.191],
  [5, 0.199],
  [6, 0.204],
  [7, 0.208],
  [8, 0.21],
  [9, 0.212],
  [10, 0.212],
  [11, 0.214],
  [15, 0.215],
  [16, 0.216],
  [17, 0.217],
  [30, 0.218],
  [60, 0.22],
];

export interface CramerVonMises {
  readonly failures: number;
  /** β̃ = (N−1) β̂/N, the slope the statistic uses. */
  readonly unbiasedSlope: number;
  /** C²_M. */
  readonly statistic: number;
  readonly criticalAtFivePercent: number;
  /** Whether the power law is rejected at 5 %. */
  readonly rejected: boolean;
}

/**
 * Cramér–von Mises check of a power-law process with time-terminated windows:
 *
 *     C² = 1/(12 M) + Σ (z_(i) − (2i−1)/(2M))²,   z = (t^β̃ − entry^β̃)/(exit^β̃ − entry^β̃)
 *
 * For entry 0 and one exit z is the printed (t/T)^β̃; for other windows the same transform makes each
 * failure uniform given the count of its history. For histories that end by their failure (lives) the
 * check does not apply.
 *
 * Source: Crow 1975 (AMSAA TR-138); MIL-HDBK-189 (1981), Appendix C.
 *
 * @param slope maximum-likelihood slope β̂ of the same histories, above 0.
 * @returns null with fewer than 2 failures, where the unbiased slope does not exist.
 */
export function cramerVonMises(histories: readonly History[], slope: number): CramerVonMises | null {
  const failures = countFailures(histories);
  if (failures < 2) return null;
  const unbiasedSlope = ((failures - 1) / failures) * slope;
  const uniforms = histories
    .flatMap((history) => history.failures.map((time) => shareOfWindow(time, history, unbiasedSlope)))
    .sort((a, b) => a - b);
  let statistic = 1 / (12 * failures);
  uniforms.forEach((uniform, index) => {
    statistic += (uniform - (2 * index + 1) / (2 * failures)) ** 2;
  });
  const critical = criticalValue(failures);
  return {
    failures,
    unbiasedSlope,
    statistic,
    criticalAtFivePercent: critical,
    rejected: statistic > critical,
  };
}

/** Share of the window's expected failures that come before `time`, times taken relative to the exit. */
function shareOfWindow(time: number, { entry, exit }: History, slope: number): number {
  // expm1 keeps the digits of a short window late in life, where all powers are near 1.
  const below = (at: number): number => -Math.expm1(slope * Math.log(at / exit));
  const whole = entry === 0 ? 1 : below(entry);
  return whole > 0 ? Math.min(1, Math.max(0, 1 - below(time) / whole)) : (time - entry) / (exit - entry);
}

function criticalValue(failures: number): number {
  let value = 0;
  for (const [count, critical] of criticalAtFivePercent) if (count <= failures) value = critical;
  return value;
}
