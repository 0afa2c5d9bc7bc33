import type { Position, PositionEvent } from '~/reliability/position';
import { calendarUsage } from '~/reliability/usage';
import { weibullLife, type Random } from './seeded-random';

export interface SimulatedClass {
  readonly shape: number;
  /** Days. */
  readonly scale: number;
  readonly positions: number;
  readonly watchedDays: number;
  /** Replace at this age, or never. */
  readonly renewalAgeDays?: number;
}

/** 30 positions watched for three years, η of 900 days: about 38 failures. */
export const usualClass = { scale: 900, positions: 30, watchedDays: 1096 } as const;

/**
 * A class of Weibull items at known positions, each failed item replaced at once. Positions went into
 * service on days spread evenly over the `scale` days before the watch; the item in place at the start of
 * the watch has lived since then or since its latest replacement, which is known.
 */
export function simulateClass(random: Random, setting: SimulatedClass): Position[] {
  const { shape, scale, positions, watchedDays, renewalAgeDays = Infinity } = setting;
  return Array.from({ length: positions }, (_, index): Position => {
    const inServiceAt = -Math.floor(((index + 0.5) / positions) * scale);
    const events: PositionEvent[] = [];
    let fittedAt = inServiceAt;
    let itemAtStart = inServiceAt;
    for (;;) {
      const life = weibullLife(random, shape, scale);
      const at = fittedAt + Math.min(life, renewalAgeDays);
      if (at > watchedDays) break;
      if (at <= 0) itemAtStart = at;
      else {
        const kind = life <= renewalAgeDays ? 'failure-renewed' : 'planned-renewal';
        events.push({ at, kind, mode: null, itemFittedAt: null });
      }
      fittedAt = at;
    }
    return {
      id: `position-${index + 1}`,
      inServiceAt,
      watchFrom: 0,
      watchTo: watchedDays,
      fittedAt: itemAtStart,
      usage: calendarUsage,
      halfResolutionDays: 0.5,
      events,
    };
  });
}
