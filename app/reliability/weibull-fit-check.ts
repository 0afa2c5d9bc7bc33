import type { History } from './history';
import { chiSquaredUpperTail } from './special-functions';

export interface WeibullFitCheck {
  readonly failures: number;
  /** Age bands the alternative is free in, each with about the same number of failures. */
  readonly bands: number;
  /** Likelihood-ratio statistic, at least 0. */
  readonly statistic: number;
  readonly degreesOfFreedom: number;
  readonly p: number;
}

/** Fewest failures a band may hold, and most bands. */
const fewestInBand = 5;
const mostBands = 4;

/**
 * Whether the data contradict a power-law hazard (Weibull life), with censoring and late entries: the
 * likelihood-ratio test against h(t) = θ_j β t^(β−1), a level θ_j of its own in each of J age bands and
 * one slope. For a given β the levels are θ_j = n_j/Σ(exit^β − entry^β within the band), which leaves one
 * parameter to search. Chi-squared on J − 1 degrees of freedom.
 *
 * Source: Wilks 1938 for the law; banded alternatives to a parametric hazard as in Hjort 1990. Band edges
 * lie midway between failure ages at the quantiles (common practice).
 *
 * @param shape maximum-likelihood β of the same histories.
 * @returns null when fewer than two bands of 5 failures can be made.
 */
export function weibullFitCheck(histories: readonly History[], shape: number): WeibullFitCheck | null {
  const times = histories.flatMap((history) => history.failures).sort((a, b) => a - b);
  const failures = times.length;
  const edges = bandEdges(times);
  if (edges.length === 0) return null;

  const bands = new BandedExposure(histories, edges);
  const counts = new Array<number>(edges.length + 1).fill(0);
  let sumOfLogs = 0;
  for (const time of times) {
    const band = edges.filter((edge) => edge < time).length;
    counts[band] = (counts[band] ?? 0) + 1;
    sumOfLogs += Math.log(time / bands.largest);
  }
  // Terms both models share, n ln n and n, are left out of both.
  const common = (slope: number): number => failures * Math.log(slope) + (slope - 1) * sumOfLogs;
  const oneLevel = (slope: number): number => {
    const whole = bands.at(slope).reduce((sum, exposure) => sum + exposure, 0);
    return common(slope) + failures * Math.log(failures / whole);
  };
  const ownLevels = (slope: number): number =>
    bands
      .at(slope)
      .reduce(
        (sum, exposure, band) => sum + (counts[band] ?? 0) * Math.log((counts[band] ?? 0) / exposure),
        common(slope),
      );

  const best = Math.max(
    ownLevels(shape),
    maximum((log) => ownLevels(Math.exp(log)), Math.log(shape) - 2, Math.log(shape) + 2),
  );
  const statistic = Math.max(0, 2 * (best - oneLevel(shape)));
  return {
    failures,
    bands: counts.length,
    statistic,
    degreesOfFreedom: edges.length,
    p: chiSquaredUpperTail(statistic, edges.length),
  };
}

/** Σ(exit^β − entry^β) within each band, ages taken relative to the largest exit so that no power overflows. */
class BandedExposure {
  readonly largest: number;
  readonly #edges: readonly number[];
  /** Relative ages at which a history comes (+1 at exit, −1 at entry), by the band they lie in. */
  readonly #ends: readonly { readonly logAge: number; readonly band: number; readonly sign: 1 | -1 }[];
  /** Histories that run through each edge. */
  readonly #through: readonly number[];

  constructor(histories: readonly History[], edges: readonly number[]) {
    this.largest = histories.reduce((largest, { exit }) => Math.max(largest, exit), 0);
    this.#edges = edges.map((edge) => edge / this.largest);
    const bandOf = (age: number): number => edges.filter((edge) => edge < age).length;
    const end = (age: number, sign: 1 | -1) => ({
      logAge: Math.log(age / this.largest),
      band: bandOf(age),
      sign,
    });
    this.#ends = histories.flatMap(({ entry, exit }) =>
      entry > 0 ? [end(exit, 1), end(entry, -1)] : [end(exit, 1)],
    );
    this.#through = edges.map(
      (edge) => histories.filter(({ entry, exit }) => entry <= edge && exit > edge).length,
    );
  }

  at(slope: number): number[] {
    const exposures = new Array<number>(this.#edges.length + 1).fill(0);
    const add = (band: number, amount: number): void => {
      exposures[band] = (exposures[band] ?? 0) + amount;
    };
    for (const { logAge, band, sign } of this.#ends) add(band, sign * Math.exp(slope * logAge));
    this.#edges.forEach((edge, index) => {
      const power = (this.#through[index] ?? 0) * edge ** slope;
      add(index, power);
      add(index + 1, -power);
    });
    return exposures;
  }
}

/** Edges between bands of about equal failures; none inside a tie. */
function bandEdges(times: readonly number[]): number[] {
  const bands = Math.min(mostBands, Math.floor(times.length / fewestInBand));
  const edges: number[] = [];
  let from = 0;
  for (let band = 1; band < bands; band += 1) {
    let cut = Math.round((band * times.length) / bands);
    while (cut < times.length && times[cut] === times[cut - 1]) cut += 1;
    if (cut - from < fewestInBand || times.length - cut < fewestInBand) continue;
    edges.push(((times[cut - 1] ?? 0) + (times[cut] ?? 0)) / 2);
    from = cut;
  }
  return edges;
}

/** Largest value of a function with one peak on [low, high], by golden-section search. */
function maximum(value: (at: number) => number, low: number, high: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [left, right] = [high - golden * (high - low), low + golden * (high - low)];
  let [atLeft, atRight] = [value(left), value(right)];
  while (high - low > 1e-5) {
    if (atLeft > atRight) {
      [high, right, atRight] = [right, left, atLeft];
      left = high - golden * (high - low);
      atLeft = value(left);
    } else {
      [low, left, atLeft] = [left, right, atRight];
      right = low + golden * (high - low);
      atRight = value(right);
    }
  }
  return Math.max(atLeft, atRight);
}
