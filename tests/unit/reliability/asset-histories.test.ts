import { describe, expect, it } from 'vitest';
import { assetHistories } from '~/reliability/asset-histories';
import { assertHistory } from '~/reliability/history';
import { anEvent, aPosition } from '../../support/position';

describe('positions on the asset clock', () => {
  it('counts from going into service and enters at the opening of the watch', () => {
    const events = [
      anEvent(-5),
      anEvent(100),
      anEvent(100, 'failure-patched'),
      anEvent(400, 'planned-renewal'),
    ];
    const { histories } = assetHistories([aPosition({ inServiceAt: -50, events })]);
    histories.forEach(assertHistory);
    expect(histories).toEqual([{ positionId: 'position-1', entry: 50, exit: 1050, failures: [150, 150] }]);
  });

  it('keeps one mode', () => {
    const events = [anEvent(100, 'failure-renewed', { mode: 'seal' }), anEvent(200)];
    expect(assetHistories([aPosition({ events })], { mode: 'seal' }).histories[0]?.failures).toEqual([100]);
  });

  it('puts a failure on the first day half a day in', () => {
    const result = assetHistories([aPosition({ events: [anEvent(0)] })]);
    expect(result.histories[0]?.failures).toEqual([0.5]);
    expect(result.zeroAges).toBe(1);
  });

  it('has nothing to say of a position that was not watched or whose clock stood still', () => {
    const still = aPosition({ usage: { at: () => 7 } });
    expect(assetHistories([aPosition({ watchTo: 0 }), still]).histories).toEqual([]);
  });
});
