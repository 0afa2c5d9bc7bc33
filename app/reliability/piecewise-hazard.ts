import { rateInterval } from './exponential';
import type { History } from './history';

/** The hazard in one band of ages, taken as constant within it. */
export interface HazardBand {
  readonly from: number;
  readonly to: number;
  readonly failures: number;
  /** Time watched within the band, all histories together. */
  readonly exposure: number;
  /** Failures per clock unit. */
  readonly rate: number;
  /** Exact Poisson interval for the rate. */
  readonly low: number;
  readonly high: number;
}

export interface PiecewiseHazard {
  readonly bands: readonly HazardBand[];
  /** Longest age reached by any history, failed or not. Beyond it nothing was seen. */
  readonly longestAge: number;
}

const fewestFailuresInBand = 5;
const mostBands = 8;

/**
 * Hazard by age band, each band with at least 5 failures and about equally many, at most 8 bands. A band
 * ends half-way between two failure ages, never on one; the first starts at the youngest age watched and
 * the last ends at the longest. No band with fewer than 5 failures in all.
 *
 * @param level two-sided level of the exact Poisson intervals.
 */
export function piecewiseHazard(histories: readonly History[], level = 0.9): PiecewiseHazard {
  const ages = Float64Array.from(histories.flatMap(({ failures }) => failures)).sort();
  const longestAge = histories.reduce((longest, { exit }) => Math.max(longest, exit), 0);
  if (ages.length < fewestFailuresInBand) return { bands: [], longestAge };
  const youngest = histories.reduce((least, { entry }) => Math.min(least, entry), longestAge);

  const edges = [youngest, ...innerEdges(ages), longestAge];
  const bands = edges.slice(1).map((to, index): HazardBand => {
    const from = edges[index]!;
    const failures = ages.filter((age) => age > from && age <= to).length;
    const exposure = histories.reduce(
      (sum, { entry, exit }) => sum + Math.max(0, Math.min(exit, to) - Math.max(entry, from)),
      0,
    );
    const { low, high } = rateInterval(failures, exposure, level);
    return { from, to, failures, exposure, rate: failures / exposure, low, high };
  });
  return { bands, longestAge };
}

/** Cuts after every `size` failures, moved past ties, leaving at least 5 for the last band. */
function innerEdges(ages: Float64Array): number[] {
  const bandCount = Math.min(mostBands, Math.floor(ages.length / fewestFailuresInBand));
  const size = Math.max(fewestFailuresInBand, Math.ceil(ages.length / bandCount));
  const edges: number[] = [];
  let inBand = 0;
  for (let index = 0; index < ages.length - fewestFailuresInBand; index += 1) {
    inBand += 1;
    const age = ages[index]!;
    const next = ages[index + 1]!;
    if (inBand >= size && next > age) {
      edges.push(age + (next - age) / 2);
      inBand = 0;
    }
  }
  return edges;
}
