import { describe, expect, it } from 'vitest';
import { pooledExposure, pooledExposureClock } from '~/reliability/pooled-exposure';
import { dutyUsage, meteredUsage } from '~/reliability/usage';
import { anEvent, aPosition } from '../../support/position';

const first = aPosition({ id: 'a', watchTo: 100 });
const second = aPosition({ id: 'b', inServiceAt: -50, watchFrom: 40, watchTo: 80, usage: dutyUsage(2) });
const metered = aPosition({
  id: 'c',
  watchTo: 100,
  usage: meteredUsage(
    [
      { at: 0, hours: 0 },
      { at: 50, hours: 5 },
      { at: 100, hours: 500 },
    ],
    1,
  ),
});

describe('pooled exposure', () => {
  it('adds up the clocks inside their watches', () => {
    const clock = pooledExposureClock([first, second, metered]);
    expect([-10, 0, 20, 60, 80, 100, 900].map(clock)).toEqual([0, 0, 22, 204, 462, 680, 680]);
    expect(pooledExposureClock([])(5)).toBe(0);
  });

  it('puts failures in calendar order, those outside the watch left out', () => {
    const positions = [
      { ...first, events: [anEvent(60), anEvent(101)] },
      { ...second, events: [anEvent(10), anEvent(50)] },
    ];
    const pooled = pooledExposure(positions);
    expect(pooled.failures.map(({ at, exposure, positionId }) => [at, exposure, positionId])).toEqual([
      [50, 70, 'b'],
      [60, 100, 'a'],
    ]);
    expect(pooled.totalExposure).toBe(180);
  });

  it('splits failures of one day over that day’s exposure, the last at its end', () => {
    const positions = ['a', 'b', 'c', 'd'].map((id) => aPosition({ id, events: [anEvent(10)] }));
    const exposures = pooledExposure(positions).failures.map(({ exposure }) => exposure);
    expect(exposures).toEqual([37, 38, 39, 40]);
  });

  it('does not move a failure when later days are added', () => {
    const events = [anEvent(10), anEvent(10), anEvent(11)];
    const early = pooledExposure([aPosition({ watchTo: 11, events })]);
    const late = pooledExposure([aPosition({ watchTo: 900, events })]);
    expect(late.failures).toEqual(early.failures);
  });

  it('gives a failure before any exposure half a resolution of it', () => {
    const { failures } = pooledExposure([aPosition({ events: [anEvent(0), anEvent(0)] })]);
    expect(failures.map(({ exposure }) => exposure)).toEqual([0.25, 0.5]);
  });

  it('keeps failures in order when the first came before any exposure', () => {
    const positions = [
      aPosition({ id: 'a', events: [anEvent(0)] }),
      aPosition({ id: 'b', events: [anEvent(10 / 1440)] }),
    ];
    const exposures = pooledExposure(positions).failures.map(({ exposure }) => exposure);
    expect(exposures[0]).toBeGreaterThan(0);
    expect(exposures[1]).toBeGreaterThanOrEqual(exposures[0]!);
  });
});
