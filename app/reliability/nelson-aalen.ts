import type { History } from './history';
import { normalQuantile } from './special-functions';

/** The cumulative hazard just after one failure age. */
export interface NelsonAalenStep {
  readonly age: number;
  /** Failures at this age. */
  readonly failures: number;
  /** Histories under watch at this age: entry < age ≤ exit. */
  readonly atRisk: number;
  readonly cumulativeHazard: number;
  readonly standardError: number;
  /** Pointwise interval H exp(∓ z se/H). */
  readonly low: number;
  readonly high: number;
}

/**
 * Nelson–Aalen estimate of the cumulative hazard, late entries and repeated failures included: at each
 * failure age add d/m; variance Σ d/m².
 *
 * @param level two-sided level of the pointwise interval.
 *
 * Sources: Nelson 1969; Aalen 1978; log-transformed interval Bie, Borgan & Liestøl 1987.
 */
export function nelsonAalen(histories: readonly History[], level = 0.9): NelsonAalenStep[] {
  const entries = Float64Array.from(histories, ({ entry }) => entry).sort();
  const exits = Float64Array.from(histories, ({ exit }) => exit).sort();
  const ages = Float64Array.from(histories.flatMap(({ failures }) => failures)).sort();
  const z = normalQuantile((1 + level) / 2);
  const steps: NelsonAalenStep[] = [];
  let entered = 0;
  let left = 0;
  let hazard = 0;
  let variance = 0;
  for (let index = 0; index < ages.length;) {
    const age = ages[index]!;
    const start = index;
    while (index < ages.length && ages[index] === age) index += 1;
    while (entered < entries.length && entries[entered]! < age) entered += 1;
    while (left < exits.length && exits[left]! < age) left += 1;
    const failures = index - start;
    const atRisk = entered - left;
    hazard += failures / atRisk;
    variance += failures / atRisk ** 2;
    const standardError = Math.sqrt(variance);
    const factor = Math.exp((z * standardError) / hazard);
    steps.push({
      age,
      failures,
      atRisk,
      cumulativeHazard: hazard,
      standardError,
      low: hazard / factor,
      high: hazard * factor,
    });
  }
  return steps;
}
