import { lifeChain } from './life-chain';
import type { Position } from './position';
import type { Usage } from './usage';
import { halfResolutionAfter, isFailureOf } from './watched-events';

/** One failure with the ages of all positions under watch at that moment. Valid during the visit only. */
export interface AgeRiskSet {
  readonly at: number;
  readonly positionId: string;
  readonly mode: string | null;
  /** Age of the failed item, clock units, above 0. */
  readonly failedAge: number;
  /** Half the resolution of the record at the failed item, clock units. */
  readonly halfResolution: number;
  /** Ages in place at the failure, the failed one among them: `counts[i]` positions hold `ages[i]`, i < `groups`. */
  readonly groups: number;
  readonly ages: Float64Array;
  readonly counts: Float64Array;
  /** Whether the ages are known to differ from one another, so that nobody need look for ties among them. */
  readonly agesDiffer: boolean;
  /** Positions under watch with a known age, the failed one included: the sum of the counts. */
  readonly size: number;
}

/** Items fitted at one moment whose clocks run alike, by number. */
interface Cohorts {
  readonly usage: Usage[];
  readonly fittedAt: number[];
  /** Clock units a day, NaN where the clock is not steady. */
  readonly pace: number[];
}

interface DatedLife {
  readonly from: number;
  readonly to: number;
  readonly cohort: number;
}

interface DatedFailure {
  readonly position: Position;
  readonly at: number;
  readonly mode: string | null;
  readonly life: DatedLife;
  /** What its position counts under just before `at`, if the age was known then; else −1. */
  readonly cohortBefore: number;
}

/**
 * Walks through all failures in order of time, each with the ages of the class's positions at that moment.
 *
 * Each failure sees the state just before its moment, so that two events recorded at one moment (one day,
 * where only the day is known) see the same peers. An item that was fitted and failed at the same moment
 * takes its position's place in the set at half a resolution of age. Items fitted on one day whose clocks
 * run at one steady pace are counted together, which keeps a walk over 100,000 positions short.
 *
 * @param visit called for each failure whose item has a known age; the arrays are reused between calls.
 * @param options.mode only failures of this mode; the peers are the same.
 * @returns how many failures were left out because the age of the failed item is unknown.
 */
export function forEachAgeRiskSet(
  positions: readonly Position[],
  visit: (riskSet: AgeRiskSet) => void,
  { mode }: { mode?: string } = {},
): { unknownAge: number } {
  const { lives, failures, cohorts, unknownAge } = datedLives(positions, mode);
  const { fittedAt } = cohorts;
  const byFrom = lives.toSorted((a, b) => a.from - b.from || fittedAt[a.cohort]! - fittedAt[b.cohort]!);
  const byTo = lives.toSorted((a, b) => a.to - b.to);
  const present = new CountedSet(fittedAt.length);
  const ages = new Float64Array(fittedAt.length + 1);
  const counts = new Float64Array(fittedAt.length + 1);
  const ageAt = ageFunction(cohorts);
  const oneSteadyClock = new Set(cohorts.pace).size === 1 && !Number.isNaN(cohorts.pace[0]);
  let entered = 0;
  let left = 0;

  for (const { at, position, mode: failedMode, life, cohortBefore } of failures) {
    for (; entered < byFrom.length && byFrom[entered]!.from < at; entered += 1) {
      present.add(byFrom[entered]!.cohort);
    }
    for (; left < byTo.length && byTo[left]!.to < at; left += 1) present.remove(byTo[left]!.cohort);

    const halfResolution = halfResolutionAfter(position, at);
    const isNew = life.from >= at;
    let groups = 0;
    let size = 0;
    const put = (age: number, count: number) => {
      ages[groups] = age || halfResolution;
      counts[groups] = count;
      groups += 1;
      size += count;
    };
    for (let index = 0; index < present.size; index += 1) {
      const cohort = present.members[index]!;
      const count = present.counts[cohort]! - (isNew && cohort === cohortBefore ? 1 : 0);
      if (count > 0) put(ageAt(cohort, at), count);
    }
    if (isNew) put(halfResolution, 1);
    const failedAge = isNew ? halfResolution : ageAt(life.cohort, at) || halfResolution;
    const agesDiffer = oneSteadyClock && !isNew;
    visit({
      at,
      positionId: position.id,
      mode: failedMode,
      failedAge,
      halfResolution,
      groups,
      ages,
      counts,
      agesDiffer,
      size,
    });
  }
  return { unknownAge };
}

/** Age of a cohort at a calendar time, in clock units: by its pace where that is steady. */
function ageFunction({ usage, fittedAt, pace }: Cohorts): (cohort: number, at: number) => number {
  const [fitted, paces] = [Float64Array.from(fittedAt), Float64Array.from(pace)];
  return (cohort, at) => {
    const steady = paces[cohort]!;
    const since = fitted[cohort]!;
    if (steady === steady) return steady * (at - since);
    return usage[cohort]!.at(at) - usage[cohort]!.at(since);
  };
}

/** A multiset of small numbers whose members stand close together, for walking through it often. */
class CountedSet {
  size = 0;
  readonly members: Int32Array;
  readonly counts: Int32Array;
  private readonly places: Int32Array;

  constructor(capacity: number) {
    this.members = new Int32Array(capacity);
    this.counts = new Int32Array(capacity);
    this.places = new Int32Array(capacity);
  }

  add(member: number): void {
    if (this.counts[member] === 0) {
      this.members[this.size] = member;
      this.places[member] = this.size;
      this.size += 1;
    }
    this.counts[member]! += 1;
  }

  remove(member: number): void {
    this.counts[member]! -= 1;
    if (this.counts[member]! > 0) return;
    this.size -= 1;
    const last = this.members[this.size]!;
    this.members[this.places[member]!] = last;
    this.places[last] = this.places[member]!;
  }
}

/** All lives of known age, in cohorts, and the failures among them in order of time. */
function datedLives(
  positions: readonly Position[],
  mode: string | undefined,
): { lives: DatedLife[]; failures: DatedFailure[]; cohorts: Cohorts; unknownAge: number } {
  const cohorts: Cohorts = { usage: [], fittedAt: [], pace: [] };
  const known = new Map<number | Usage, Map<number, number>>();
  const cohortOf = (usage: Usage, fittedAt: number): number => {
    const clock = usage.steadyUnitsPerDay ?? usage;
    let sameClock = known.get(clock);
    if (sameClock === undefined) known.set(clock, (sameClock = new Map<number, number>()));
    let cohort = sameClock.get(fittedAt);
    if (cohort === undefined) {
      cohort = cohorts.usage.length;
      sameClock.set(fittedAt, cohort);
      cohorts.usage.push(usage);
      cohorts.fittedAt.push(fittedAt);
      cohorts.pace.push(usage.steadyUnitsPerDay ?? NaN);
    }
    return cohort;
  };

  const lives: DatedLife[] = [];
  const failures: DatedFailure[] = [];
  let unknownAge = 0;
  for (const position of positions) {
    const here: DatedLife[] = [];
    for (const life of lifeChain(position).lives) {
      const wanted = life.failures.filter((event) => isFailureOf(event, mode));
      if (life.fittedAt === null) {
        unknownAge += wanted.length;
        continue;
      }
      const dated = { from: life.from, to: life.to, cohort: cohortOf(position.usage, life.fittedAt) };
      here.push(dated);
      for (const event of wanted) {
        const before = here.find(({ from, to }) => from < event.at && event.at <= to);
        const cohortBefore = before?.cohort ?? -1;
        failures.push({ position, at: event.at, mode: event.mode, life: dated, cohortBefore });
      }
    }
    for (const life of here) lives.push(life);
  }
  return { lives, failures: failures.sort((a, b) => a.at - b.at), cohorts, unknownAge };
}
