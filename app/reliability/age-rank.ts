import { forEachAgeRiskSet, type AgeRiskSet } from './age-risk-sets';
import type { Position } from './position';
import { normalUpperTail } from './special-functions';

/** One mark on the age-rank strip. */
export interface AgeRankMark {
  readonly at: number;
  readonly positionId: string;
  readonly mode: string | null;
  /** r: share of the positions under watch that were younger, half of those of equal age (itself included) added. */
  readonly share: number;
  /** m: positions under watch with a known age at that moment. */
  readonly size: number;
  /** v: variance of the m midranks; 0 where all ages were equal. */
  readonly variance: number;
}

export interface AgeRankTest {
  /** In order of time. */
  readonly marks: readonly AgeRankMark[];
  /** Mean share over the marks that carry weight; 1/2 without a memory. Null without such marks. */
  readonly meanShare: number | null;
  /** N(0, 1) without a memory, above 0 where the old ones fail first. Null without weight. */
  readonly z: number | null;
  readonly pTwoSided: number | null;
  /** One-sided p against "the old ones fail first". */
  readonly pOldFirst: number | null;
  /** Failures at which all ages were equal: they say nothing either way. */
  readonly weightless: number;
  /** Failures left out because the age of the failed item is unknown. */
  readonly unknownAge: number;
}

/**
 * Age-rank test: at each failure the failed item's age is ranked among all positions of the class under
 * watch at that moment. With no memory every position is equally likely to be the one, so the mean share
 * is 1/2, and z = Σ(r − 1/2)/√(Σ v). Needs no model and no steady usage: whatever changes the whole
 * class's rate at once cancels.
 *
 * @param options.mode only failures of this mode; all of them unless given.
 *
 * Source: a rank score test, the idea of Cox's partial likelihood (Cox 1972, 1975) with the rank of the
 * age as covariate; the variance of midranks is Kruskal & Wallis 1952.
 */
export function ageRankTest(positions: readonly Position[], options: { mode?: string } = {}): AgeRankTest {
  const marks: AgeRankMark[] = [];
  const { unknownAge } = forEachAgeRiskSet(positions, (riskSet) => marks.push(markOf(riskSet)), options);

  const weighty = marks.filter(({ variance }) => variance > 0);
  const variance = weighty.reduce((sum, mark) => sum + mark.variance, 0);
  const deviation = weighty.reduce((sum, mark) => sum + (mark.share - 0.5), 0);
  const z = weighty.length > 0 ? deviation / Math.sqrt(variance) : null;
  return {
    marks,
    meanShare: weighty.length > 0 ? 0.5 + deviation / weighty.length : null,
    z,
    pTwoSided: z === null ? null : Math.min(1, 2 * normalUpperTail(Math.abs(z))),
    pOldFirst: z === null ? null : normalUpperTail(z),
    weightless: marks.length - weighty.length,
    unknownAge,
  };
}

function markOf(riskSet: AgeRiskSet): AgeRankMark {
  const { at, positionId, mode, failedAge, ages, counts, groups, size } = riskSet;
  let younger = 0;
  let equal = 0;
  for (let index = 0; index < groups; index += 1) {
    if (ages[index]! < failedAge) younger += counts[index]!;
    else if (ages[index] === failedAge) equal += counts[index]!;
  }
  const share = (younger + equal / 2) / size;
  // (m³ − Σ c³)/12m³ over groups of c equal ages: (m² − 1)/12m² where none are equal.
  const variance = (size ** 3 - sumOfCubedTies(riskSet)) / (12 * size ** 3);
  return { at, positionId, mode, share, size, variance };
}

/** Σ c³ over groups of c positions of equal age. The few ages that occur in two places are joined up first. */
function sumOfCubedTies({ ages, counts, groups, agesDiffer }: AgeRiskSet): number {
  const repeated = agesDiffer ? [] : repeatedValues(ages.slice(0, groups));
  const joined = new Float64Array(repeated.length);
  let sum = 0;
  for (let index = 0; index < groups; index += 1) {
    const place = placeIn(repeated, ages[index]!);
    if (place < 0) sum += counts[index]! ** 3;
    else joined[place]! += counts[index]!;
  }
  return joined.reduce((total, count) => total + count ** 3, sum);
}

/** The values that occur more than once, ascending. Sorts what it is given. */
function repeatedValues(values: Float64Array): number[] {
  values.sort();
  const repeated: number[] = [];
  for (let index = 1; index < values.length; index += 1) {
    const value = values[index]!;
    if (value === values[index - 1] && value !== repeated.at(-1)) repeated.push(value);
  }
  return repeated;
}

/** Where a value stands in an ascending list, or −1. */
function placeIn(ascending: readonly number[], value: number): number {
  let left = 0;
  let right = ascending.length - 1;
  while (left <= right) {
    const middle = (left + right) >> 1;
    if (ascending[middle] === value) return middle;
    if (ascending[middle]! < value) left = middle + 1;
    else right = middle - 1;
  }
  return -1;
}
