import { renewalTable } from './renewal-function';
import { weibullCumulativeHazard, weibullMeanLife, weibullRestrictedMean, type Weibull } from './weibull';

/** Items in place now and what is to come. */
export interface WearOutPeriod {
  /** Age of the item at each position, clock units, at least 0. */
  readonly ages: readonly number[];
  /** Length of the period in the same units, above 0: what each position will run through. */
  readonly horizon: number;
  /** Age at which items are renewed by plan, or null where none is. Older items are renewed at once. */
  readonly plannedInterval: number | null;
}

/** More ages than this are gathered into so many groups of equal size, each at its mean. */
const mostGroups = 16;

/** The grid is made finer where a period spans several lives, and given up where it spans many. */
const stepsPerLife = 12;
const manyLives = 40;
/** Cells of the grid on which the dispersion is computed, whatever the period. */
const mostCells = 240;
/** Numerical error must not make a count certain. */
const leastDispersion = 0.05;

interface AgeGroup {
  readonly age: number;
  readonly count: number;
}

/** Steps of one grid along which an item may leave its place, from the age it has now. */
interface Leaving {
  /** ln of the age reached in the middle of each step, by increasing age. */
  readonly logAge: Float64Array;
  /** Share of each step that lies beyond the planned interval, where the item has surely left. */
  readonly byPlan: Float64Array;
}

/** What one grid asks of every life: computed once, as the ages are the same for each. */
interface Grid {
  /** ln of the age in place of a new item at i h. */
  readonly newItem: Float64Array;
  readonly newItemLeaving: Leaving;
  /** ln of the age in place at the end of the period, by group. */
  readonly groupEnd: readonly number[];
  readonly groupLeaving: readonly Leaving[];
}

/**
 * Failures expected at all positions together over a period, for one life after another: each item fails
 * with its conditional chance given its age, F_a(t) + ∫ G_a(t − u) dM(u), with G_a the chance that it has
 * left its place and M the failures of the items that follow it (renewal equation, planned renewals
 * included).
 */
export class FailuresToCome {
  readonly #period: WearOutPeriod;
  readonly #planned: number;
  readonly #groups: readonly AgeGroup[];
  readonly #grids = new Map<number, Grid>();

  /** @throws RangeError for a horizon or a planned interval that is not above 0. */
  constructor(period: WearOutPeriod) {
    this.#planned = period.plannedInterval ?? Infinity;
    if (!(period.horizon > 0 && this.#planned > 0)) {
      throw new RangeError(`horizon ${period.horizon} or planned interval ${this.#planned} is not above 0`);
    }
    this.#period = period;
    this.#groups = groupAges(period.ages.map((age) => (age >= this.#planned ? 0 : age)));
  }

  /** @param leastSteps of the grid within the period. */
  expected(life: Weibull, leastSteps: number): number {
    const livesAhead = this.#period.horizon / Math.min(life.scale, this.#planned);
    if (livesAhead > manyLives) return this.#longRun(life);
    let steps = leastSteps;
    while (steps < stepsPerLife * livesAhead) steps *= 2;
    const grid = this.#grid(steps);
    const lnScale = Math.log(life.scale);
    const failed = (logAge: number, hazardNow: number): number =>
      1 - Math.exp(hazardNow - Math.exp(life.shape * (logAge - lnScale)));
    const left = ({ logAge, byPlan }: Leaving, step: number, hazardNow: number): number => {
      const share = byPlan[step]!;
      return share === 1 ? 1 : share + (1 - share) * failed(logAge[step]!, hazardNow);
    };
    const table = renewalTable(
      grid.newItem.map((logAge) => failed(logAge, 0)),
      grid.newItem.slice(1).map((_, step) => left(grid.newItemLeaving, step, 0)),
    );
    let total = 0;
    for (let group = 0; group < this.#groups.length; group += 1) {
      const { age, count } = this.#groups[group]!;
      const hazardNow = weibullCumulativeHazard(life, age);
      const leaving = grid.groupLeaving[group]!;
      let expected = failed(grid.groupEnd[group]!, hazardNow);
      for (let j = 1; j <= steps; j += 1) {
        expected += left(leaving, steps - j, hazardNow) * (table[j]! - table[j - 1]!);
      }
      total += count * Math.max(0, expected);
    }
    return total;
  }

  /**
   * Variance over mean of the count, were the life known: positions are independent, and for one of them
   * E[N(N − 1)] = 2 ∫ M(t − u) dM_a(u), with M_a the failures expected of the item in place and those that
   * follow it, M of a new one (renewal theory, Cox 1962).
   *
   * @returns 1, as for Poisson, where no failure is expected.
   */
  dispersion(life: Weibull, steps: number): number {
    const { horizon } = this.#period;
    const planned = this.#planned;
    const cells = Math.min(
      mostCells,
      Math.max(steps, Math.ceil((stepsPerLife * horizon) / Math.min(life.scale, planned))),
    );
    const h = horizon / cells;
    const failedBy = (age: number, time: number): number =>
      1 -
      Math.exp(
        weibullCumulativeHazard(life, age) - weibullCumulativeHazard(life, Math.min(age + time, planned)),
      );
    const leftBy = (age: number, time: number): number => (age + time >= planned ? 1 : failedBy(age, time));
    const at = (
      time: (index: number) => number,
      age: number,
      of: typeof failedBy,
      length: number,
    ): Float64Array => Float64Array.from({ length }, (_, index) => of(age, time(index)));
    const end = (index: number) => index * h;
    const middle = (index: number) => (index + 0.5) * h;
    const fresh = renewalTable(at(end, 0, failedBy, cells + 1), at(middle, 0, leftBy, cells));
    let mean = 0;
    let variance = 0;
    for (const { age, count } of this.#groups) {
      const failed = at(end, age, failedBy, cells + 1);
      const left = at(middle, age, leftBy, cells);
      let previous = 0;
      let pairs = 0;
      let expected = 0;
      for (let i = 1; i <= cells; i += 1) {
        expected = failed[i]!;
        for (let j = 1; j <= i; j += 1) expected += left[i - j]! * (fresh[j]! - fresh[j - 1]!);
        pairs += (expected - previous) * ((fresh[cells - i]! + fresh[cells - i + 1]!) / 2);
        previous = expected;
      }
      mean += count * expected;
      variance += count * (expected + 2 * pairs - expected * expected);
    }
    return mean > 0 ? Math.max(leastDispersion, variance / mean) : 1;
  }

  #grid(steps: number): Grid {
    const known = this.#grids.get(steps);
    if (known) return known;
    const { horizon } = this.#period;
    const planned = this.#planned;
    const h = horizon / steps;
    const inPlace = (age: number): number => Math.log(Math.min(age, planned));
    const leavingFrom = (age: number): Leaving => ({
      logAge: Float64Array.from({ length: steps }, (_, k) => inPlace(age + (k + 0.5) * h)),
      byPlan: Float64Array.from({ length: steps }, (_, k) =>
        Math.min(1, Math.max(0, (age + (k + 1) * h - planned) / h)),
      ),
    });
    const grid: Grid = {
      newItem: Float64Array.from({ length: steps + 1 }, (_, i) => inPlace(i * h)),
      newItemLeaving: leavingFrom(0),
      groupEnd: this.#groups.map(({ age }) => inPlace(age + horizon)),
      groupLeaving: this.#groups.map(({ age }) => leavingFrom(age)),
    };
    this.#grids.set(steps, grid);
    return grid;
  }

  /** Beyond many lives ages no longer matter: failures come at F(T)/∫₀ᵀ R (elementary renewal theorem). */
  #longRun(life: Weibull): number {
    const planned = this.#planned;
    const failing = -Math.expm1(-weibullCumulativeHazard(life, planned));
    const meanLife = planned === Infinity ? weibullMeanLife(life) : weibullRestrictedMean(life, planned);
    return (this.#period.ages.length * this.#period.horizon * failing) / meanLife;
  }
}

function groupAges(ages: readonly number[]): AgeGroup[] {
  const sorted = [...ages].sort((a, b) => a - b);
  const size = Math.max(1, sorted.length / mostGroups);
  const groups: AgeGroup[] = [];
  for (let group = 0; group < Math.min(mostGroups, sorted.length); group += 1) {
    const members = sorted.slice(Math.round(group * size), Math.round((group + 1) * size));
    if (members.length === 0) continue;
    groups.push({ age: members.reduce((sum, age) => sum + age, 0) / members.length, count: members.length });
  }
  return groups;
}
