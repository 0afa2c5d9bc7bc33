import { describe, expect, it } from 'vitest';
import { estateOf, LivedClass } from '../../calibration/estate';
import { yearOfAdvice } from '../../calibration/year-of-advice';

describe('a simulated estate', () => {
  it('gives the same lives under the same seed, whatever the policy', () => {
    const [truth] = estateOf(2);
    const firstFailures = (interval: number | null) => {
      const lived = new LivedClass({ ...truth!, interval: null }, 7);
      lived.setInterval(interval);
      lived.liveUntil(400);
      return lived
        .positions()
        .map(({ events }) => events[0])
        .filter((event) => event?.kind === 'failure-renewed')
        .map((event) => event!.at);
    };
    const free = firstFailures(null);
    expect(firstFailures(5000)).toEqual(free);
    expect(firstFailures(100).every((at) => free.includes(at))).toBe(true);
  });
});

describe('following the advice', () => {
  it('costs less than never changing and than the calendar, and leaves statutory classes alone', () => {
    const { cost, changed, changedStatutory } = yearOfAdvice({ classes: 20, seed: 3, months: 24, every: 6 });
    expect(cost.follow).toBeLessThan(cost['never-change']);
    expect(cost.follow).toBeLessThan(cost.calendar);
    expect(cost.follow).toBeGreaterThan(0.9 * cost['best-possible']);
    expect(changed).toBeGreaterThan(0);
    expect(changedStatutory).toBe(0);
  }, 60_000);
});
