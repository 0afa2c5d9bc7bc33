import { describe, expect, it } from 'vitest';
import { assertHistory } from '~/reliability/history';
import { lifeHistories } from '~/reliability/life-histories';
import type { Position } from '~/reliability/position';
import { dutyUsage } from '~/reliability/usage';
import { anEvent, aPosition } from '../../support/position';

const plain = (positions: Position[], mode?: string) => {
  const result = lifeHistories(positions, mode === undefined ? {} : { mode });
  result.histories.forEach(assertHistory);
  return { ...result, shapes: result.histories.map((h) => [h.entry, h.exit, [...h.failures], h.endedBy]) };
};

describe('lives from records', () => {
  it('ends a life at each renewal, failed or planned, and starts the next at age 0', () => {
    const events = [
      anEvent(100),
      anEvent(150, 'failure-patched'),
      anEvent(400, 'planned-renewal'),
      anEvent(600, 'other-renewal'),
    ];
    const result = plain([aPosition({ events })]);
    expect(result.shapes).toEqual([
      [0, 100, [100], 'failure'],
      [0, 300, [50], 'planned-renewal'],
      [0, 200, [], 'other-renewal'],
      [0, 400, [], 'watch-end'],
    ]);
    expect(result).toMatchObject({ lives: 4, livesEndedByFailure: 1, livesEndedByPlannedRenewal: 1 });
    expect(result.plannedRenewalAges).toEqual([300]);
  });

  it('counts in operating hours at the position’s duty', () => {
    const result = plain([aPosition({ usage: dutyUsage(8), events: [anEvent(100)] })]);
    expect(result.shapes).toEqual([
      [0, 800, [800], 'failure'],
      [0, 7200, [], 'watch-end'],
    ]);
  });

  it('enters late when the first item is older than the watch', () => {
    const position = aPosition({ inServiceAt: -500, fittedAt: -200, events: [anEvent(50)] });
    expect(plain([position]).shapes[0]).toEqual([200, 250, [250], 'failure']);
  });

  it('leaves out a first life of unknown age, and counts what goes with it', () => {
    const position = aPosition({ inServiceAt: -500, events: [anEvent(50), anEvent(90)] });
    const result = plain([position]);
    expect(result.shapes).toEqual([
      [0, 40, [40], 'failure'],
      [0, 910, [], 'watch-end'],
    ]);
    expect(result).toMatchObject({
      livesLeftOut: 1,
      failuresLeftOut: 1,
      exposureLeftOut: 50,
      positionsLeftOut: 1,
    });
  });

  it('dates the first life by the latest renewal before the watch', () => {
    const events = [
      anEvent(-300),
      anEvent(-120, 'planned-renewal'),
      anEvent(-10, 'failure-patched'),
      anEvent(30),
    ];
    const result = plain([aPosition({ inServiceAt: -500, events })]);
    expect(result.shapes[0]).toEqual([120, 150, [150], 'failure']);
    expect(result.livesLeftOut).toBe(0);
  });

  it('dates the first life by the record of the event that ends it', () => {
    const events = [anEvent(30, 'failure-patched'), anEvent(50, 'failure-renewed', { itemFittedAt: -150 })];
    const result = plain([aPosition({ inServiceAt: -500, events })]);
    expect(result.shapes[0]).toEqual([150, 200, [180, 200], 'failure']);
    expect(result).toMatchObject({ datedByRecord: 1, livesLeftOut: 0 });
  });

  it('takes a later fitted-on date as a renewal that nobody recorded', () => {
    const events = [anEvent(100, 'failure-patched'), anEvent(300, 'failure-renewed', { itemFittedAt: 200 })];
    const result = plain([aPosition({ events })]);
    expect(result.shapes).toEqual([
      [0, 200, [100], 'unrecorded-renewal'],
      [0, 100, [100], 'failure'],
      [0, 700, [], 'watch-end'],
    ]);
    expect(result.conflictingDates).toBe(0);
  });

  it('keeps the chain and counts a fitted-on date that cannot be true', () => {
    const before = anEvent(300, 'failure-renewed', { itemFittedAt: 100 });
    const after = anEvent(400, 'failure-renewed', { itemFittedAt: 450 });
    const result = plain([aPosition({ events: [anEvent(200), before, after] })]);
    expect(result.shapes.map(([, exit]) => exit)).toEqual([200, 100, 100, 600]);
    expect(result.conflictingDates).toBe(2);
  });

  it('takes dates within the resolution as the same', () => {
    const events = [anEvent(200.6), anEvent(300, 'failure-renewed', { itemFittedAt: 200 })];
    const result = plain([aPosition({ events })]);
    expect(result.lives).toBe(3);
    expect(result.conflictingDates).toBe(0);
  });

  it('puts a failure at age 0 half a resolution later and never drops it', () => {
    const result = plain([aPosition({ usage: dutyUsage(8), events: [anEvent(100), anEvent(100)] })]);
    expect(result.shapes[1]).toEqual([0, 4, [4], 'failure']);
    expect(result.zeroLives).toBe(1);
  });

  it('uses half a unit where the clock stood still', () => {
    const usage = { at: (at: number) => Math.min(at, 100) };
    const result = plain([aPosition({ usage, events: [anEvent(100), anEvent(120)] })]);
    expect(result.shapes).toEqual([
      [0, 100, [100], 'failure'],
      [0, 0.5, [0.5], 'failure'],
    ]);
  });

  it('keeps a failure on the day of going into service', () => {
    const result = plain([aPosition({ events: [anEvent(0)] })]);
    expect(result.shapes[0]).toEqual([0, 0.5, [0.5], 'failure']);
  });

  it('ignores failures outside the watch', () => {
    const position = aPosition({
      inServiceAt: -10,
      fittedAt: -10,
      events: [anEvent(0, 'failure-patched'), anEvent(1001)],
    });
    expect(plain([position]).shapes).toEqual([[10, 1010, [], 'watch-end']]);
  });

  it('for one mode censors at a renewal by another and ignores its patches', () => {
    const events = [
      anEvent(50, 'failure-patched', { mode: 'seal' }),
      anEvent(100, 'failure-renewed', { mode: 'seal' }),
      anEvent(180, 'failure-renewed', { mode: 'bearing' }),
    ];
    expect(plain([aPosition({ events })], 'bearing').shapes).toEqual([
      [0, 100, [], 'other-renewal'],
      [0, 80, [80], 'failure'],
      [0, 820, [], 'watch-end'],
    ]);
  });

  it('is not moved by positions that were never watched', () => {
    const watched = aPosition({ events: [anEvent(100)] });
    const unwatched = aPosition({ id: 'never', watchFrom: 500, watchTo: 500, events: [anEvent(500)] });
    expect(lifeHistories([watched, unwatched])).toEqual(lifeHistories([watched]));
  });
});
