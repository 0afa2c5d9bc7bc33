import { mixedBets, type EValue } from './e-value';

/**
 * Age alarm: a test martingale against "every position is equally likely to be the next to fail", valid
 * however often it is looked at. Each failure multiplies the bet on shape β by
 *
 *     a_f^(β−1) / mean over the m positions under watch of a^(β−1)
 *
 * with a_f the failed item's age. Under no memory each factor has mean 1 given the past, so that E, the
 * mean of the products over β, ever reaches 1/α with chance at most α (Ville 1939; Ramdas, Grünwald, Vovk
 * & Shafer 2023). Whatever changes the whole class's rate at once cancels.
 */

/** Shapes that bet on the old ones failing first. */
export const oldFirstShapes: readonly number[] = [1.25, 1.5, 2, 3];

/** The mirror set, betting on the young ones. */
export const youngFirstShapes: readonly number[] = [1 / 1.25, 1 / 1.5, 1 / 2, 1 / 3];

/** One failure with the ages of all positions under watch at that moment, the failed one among them. */
export interface FailureAmongPeers {
  /** Age of the failed item, clock units, at least 0. */
  readonly failedAge: number;
  /** Age given to an item of age 0 at the resolution of the record, above 0. */
  readonly halfResolution: number;
  /** `counts[i]` positions hold an item of `ages[i]`, for i < `groups`. */
  readonly groups: number;
  readonly ages: ArrayLike<number>;
  readonly counts: ArrayLike<number>;
}

/** What is left of all failures so far. */
export interface AgeAlarmState {
  readonly failures: number;
  /** ln of each bet's product, in the order of `oldFirstShapes`. */
  readonly oldFirst: readonly number[];
  /** The same for `youngFirstShapes`. */
  readonly youngFirst: readonly number[];
}

export const emptyAgeAlarm: AgeAlarmState = {
  failures: 0,
  oldFirst: oldFirstShapes.map(() => 0),
  youngFirst: youngFirstShapes.map(() => 0),
};

/**
 * The state after one more failure. A rebuild is a fold of this over all failures in order, so that the
 * two agree to the last bit.
 *
 * @throws RangeError when an age is negative or not finite, or nothing is under watch.
 */
export function appendToAgeAlarm(state: AgeAlarmState, failure: FailureAmongPeers): AgeAlarmState {
  if (!(failure.halfResolution > 0)) {
    throw new RangeError(`half resolution ${failure.halfResolution} is not above 0`);
  }
  const shapes = [...oldFirstShapes, ...youngFirstShapes];
  const logFactors = logBetFactors(shapes, failure);
  const added = (products: readonly number[], offset: number): number[] =>
    products.map((product, index) => product + (logFactors[offset + index] ?? 0));
  return {
    failures: state.failures + 1,
    oldFirst: added(state.oldFirst, 0),
    youngFirst: added(state.youngFirst, oldFirstShapes.length),
  };
}

/** What the alarm says now. */
export interface AgeAlarm {
  readonly failures: number;
  readonly oldFirst: EValue;
  readonly youngFirst: EValue;
}

/** E of both sets of bets for the failures in a state; E = 1 before the first. */
export function ageAlarm(state: AgeAlarmState): AgeAlarm {
  return {
    failures: state.failures,
    oldFirst: mixedBets(state.oldFirst),
    youngFirst: mixedBets(state.youngFirst),
  };
}

/**
 * ln of the factor one failure brings to the bet on each shape. Ages count relative to the oldest, so
 * that no power overflows.
 */
function logBetFactors(shapes: readonly number[], failure: FailureAmongPeers): number[] {
  const { failedAge, halfResolution, groups, ages, counts } = failure;
  let oldest = ageAboveZero(failedAge, halfResolution);
  for (let group = 0; group < groups; group += 1) {
    oldest = Math.max(oldest, ageAboveZero(ages[group] ?? NaN, halfResolution));
  }
  const sums = shapes.map(() => 0);
  let positions = 0;
  for (let group = 0; group < groups; group += 1) {
    const count = counts[group] ?? 0;
    const logAge = Math.log(ageAboveZero(ages[group] ?? NaN, halfResolution) / oldest);
    positions += count;
    for (let bet = 0; bet < shapes.length; bet += 1) {
      sums[bet] = (sums[bet] ?? 0) + count * Math.exp(((shapes[bet] ?? 1) - 1) * logAge);
    }
  }
  if (!(positions > 0)) throw new RangeError('no position is under watch at the failure');
  const logFailed = Math.log(ageAboveZero(failedAge, halfResolution) / oldest);
  return shapes.map((shape, bet) => (shape - 1) * logFailed - Math.log((sums[bet] ?? 0) / positions));
}

function ageAboveZero(age: number, halfResolution: number): number {
  if (!(age >= 0 && age < Infinity)) throw new RangeError(`age ${age} is not a finite age of 0 or more`);
  return age > 0 ? age : halfResolution;
}
