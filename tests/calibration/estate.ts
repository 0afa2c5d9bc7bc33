import type { Position, PositionEvent } from '~/reliability/position';
import { calendarUsage } from '~/reliability/usage';
import { seededRandom } from '../support/seeded-random';

/** A class of a simulated estate, with the truth about it. */
export interface EstateClass {
  readonly name: string;
  readonly shape: number;
  /** Days. */
  readonly scale: number;
  readonly positions: number;
  readonly plannedMinor: number;
  readonly failureMinor: number;
  /** The schedule it starts with; null for none. */
  readonly interval: number | null;
  readonly statutory: boolean;
}

/** Classes of which every other one wears out; schedules too short, too long, needless and missing. */
export function estateOf(count: number): EstateClass[] {
  return Array.from({ length: count }, (_, index): EstateClass => {
    const pair = index >> 1;
    const wears = index % 2 === 0;
    const scale = 600 + 60 * (pair % 7);
    return {
      name: `class-${index}`,
      shape: wears ? [1.5, 2, 2.5, 3][pair % 4]! : 1,
      scale,
      positions: 24,
      plannedMinor: 10_000,
      failureMinor: 10_000 * [3, 6, 12][pair % 3]!,
      interval: [null, 0.4 * scale, 0.8 * scale, 1.6 * scale, null][pair % 5]!,
      statutory: pair % 10 === 9,
    };
  });
}

interface Place {
  readonly inServiceAt: number;
  readonly lives: (index: number) => number;
  life: number;
  fittedAt: number;
  fittedAtStart: number;
  interval: number | null;
  readonly events: PositionEvent[];
}

/**
 * One class lived through day by day. The n-th item ever fitted at a place has the same life whatever the
 * policy, so that policies meet the same luck as far as they can.
 */
export class LivedClass {
  readonly truth: EstateClass;
  readonly #places: Place[];
  #now = 0;

  constructor(truth: EstateClass, seed: number) {
    this.truth = truth;
    this.#places = Array.from({ length: truth.positions }, (_, index): Place => {
      const inServiceAt = -Math.floor(((index + 0.5) / truth.positions) * truth.scale);
      return {
        inServiceAt,
        lives: livesOf(truth, seed * 1000 + index),
        life: 0,
        fittedAt: inServiceAt,
        fittedAtStart: inServiceAt,
        interval: truth.interval,
        events: [],
      };
    });
    this.liveUntil(0);
    for (const place of this.#places) {
      place.fittedAtStart = place.fittedAt;
      place.events.length = 0;
    }
  }

  /** Another schedule from today on, at a share of the places. */
  setInterval(interval: number | null, share = 1): void {
    const places = this.#places.slice(0, Math.ceil(share * this.#places.length));
    for (const place of places) place.interval = interval;
  }

  liveUntil(day: number): void {
    for (const place of this.#places) {
      for (;;) {
        const fails = place.fittedAt + place.lives(place.life);
        const due = place.interval === null ? Infinity : Math.max(place.fittedAt + place.interval, this.#now);
        const at = Math.min(fails, due);
        if (at > day) break;
        const kind = fails <= due ? 'failure-renewed' : 'planned-renewal';
        place.events.push({ at, kind, mode: null, itemFittedAt: null });
        place.fittedAt = at;
        place.life += 1;
      }
    }
    this.#now = day;
  }

  /** What the records say up to today. */
  positions(): Position[] {
    return this.#places.map((place, index) => ({
      id: `${this.truth.name}-${index}`,
      inServiceAt: place.inServiceAt,
      watchFrom: 0,
      watchTo: this.#now,
      fittedAt: place.fittedAtStart,
      usage: calendarUsage,
      halfResolutionDays: 0.5,
      events: [...place.events],
    }));
  }

  /** Minor units spent after a day, up to today. */
  costSince(day: number): number {
    const { plannedMinor, failureMinor } = this.truth;
    return this.#places
      .flatMap(({ events }) => events)
      .filter(({ at }) => at > day)
      .reduce((sum, { kind }) => sum + (kind === 'planned-renewal' ? plannedMinor : failureMinor), 0);
  }
}

function livesOf({ shape, scale }: EstateClass, seed: number): (index: number) => number {
  const random = seededRandom(seed);
  const lives: number[] = [];
  return (index) => {
    while (lives.length <= index) lives.push(scale * (-Math.log(1 - random())) ** (1 / shape));
    return lives[index]!;
  };
}
