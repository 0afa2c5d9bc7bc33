import type { History } from './history';
import { normalQuantile } from './special-functions';

/** The mean cumulative function just after one failure time. */
export interface MeanCumulativePoint {
  /** Clock units. */
  readonly time: number;
  /** Failures at this time. */
  readonly failures: number;
  /** Positions under watch at this time. */
  readonly watched: number;
  /** Mean number of failures a position has had by this time. */
  readonly mean: number;
  /** Standard error of `mean`, robust to how failures fall on positions. */
  readonly standardError: number;
  /** Pointwise band, mean·exp(∓ z·se/mean), never below 0. */
  readonly lower: number;
  readonly upper: number;
}

interface Watched {
  readonly entry: number;
  readonly exit: number;
  /** Σ failures/m of this history so far. */
  own: number;
}

/**
 * Mean cumulative function: at each failure time t add d(t)/m(t), m the histories with entry < t ≤ exit.
 * The band rests on the Lawless–Nadeau variance
 *
 *     Var(t) = Σ_i [ Σ_{s ≤ t} (Y_i(s)/m(s)) (d_i(s) − d(s)/m(s)) ]²
 *
 * which holds whatever the process on one position, as positions are independent. Histories that were
 * not under watch at any failure change nothing.
 *
 * Sources: Nelson 2003; Lawless & Nadeau 1995 (variance); the band on the log scale as in Nelson 2003.
 * Work: one sort and one sweep; each history is touched at its entry, its exit and its failures only.
 *
 * @param confidence of the pointwise two-sided band, in (0, 1).
 */
export function meanCumulativeFunction(
  histories: readonly History[],
  confidence: number,
): MeanCumulativePoint[] {
  const z = normalQuantile((1 + confidence) / 2);
  const watched: Watched[] = histories.map(({ entry, exit }) => ({ entry, exit, own: 0 }));
  const byEntry = [...watched].sort((a, b) => a.entry - b.entry);
  const byExit = [...watched].sort((a, b) => a.exit - b.exit);
  const failures = histories
    .flatMap((history, index) =>
      history.failures.map((time) => ({ time, history: watched[index] as Watched })),
    )
    .sort((a, b) => a.time - b.time);

  const points: MeanCumulativePoint[] = [];
  // Residual of a history = its own Σ d_i/m less the drift Σ d/m² since its entry; the drift is shared.
  let drift = 0;
  const driftAtEntry = new Map<Watched, number>();
  const residual = (history: Watched): number => history.own - (drift - (driftAtEntry.get(history) ?? drift));
  let residualSum = 0;
  let atRisk = 0;
  let entered = 0;
  let left = 0;
  let mean = 0;
  let variance = 0;
  for (let next = 0; next < failures.length;) {
    const time = failures[next]?.time ?? NaN;
    for (let one = byEntry[entered]; one && one.entry < time; one = byEntry[(entered += 1)]) {
      driftAtEntry.set(one, drift);
      atRisk += 1;
    }
    for (let one = byExit[left]; one && one.exit < time; one = byExit[(left += 1)]) {
      residualSum -= residual(one);
      atRisk -= 1;
    }
    const failedHere = new Map<Watched, number>();
    const first = next;
    for (; next < failures.length && failures[next]?.time === time; next += 1) {
      const { history } = failures[next] as { history: Watched };
      failedHere.set(history, (failedHere.get(history) ?? 0) + 1);
    }
    const count = next - first;
    const share = count / (atRisk * atRisk);
    // Var grows by Σ (2 e δ + δ²) with δ = (d_i − d/m)/m; the part common to all at risk in one go.
    variance += -2 * share * residualSum + (atRisk - failedHere.size) * share * share;
    for (const [history, own] of failedHere) {
      const jump = own / atRisk;
      variance += 2 * residual(history) * jump + (jump - share) ** 2;
      history.own += jump;
    }
    drift += share;
    mean += count / atRisk;
    const standardError = Math.sqrt(Math.max(0, variance));
    const factor = Math.exp((z * standardError) / mean);
    points.push({
      time,
      failures: count,
      watched: atRisk,
      mean,
      standardError,
      lower: mean / factor,
      upper: mean * factor,
    });
  }
  return points;
}
