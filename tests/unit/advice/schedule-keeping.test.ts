import { describe, expect, it } from 'vitest';
import { scheduleKeeping, type KeptAsset } from '~/advice/schedule-keeping';

/** An asset watched from day 0 to day 1,000, visited on some days. */
const visited = (done: number[], differences: Partial<KeptAsset> = {}): KeptAsset => ({
  starts: done,
  done,
  from: 0,
  to: 1000,
  ...differences,
});

describe('how well a schedule is kept', () => {
  it('counts a visit within a tenth of the interval as kept, before it as early, after it as late', () => {
    expect(scheduleKeeping([visited([100, 290, 480])], 200)).toMatchObject({ due: 2, kept: 2 });
    expect(scheduleKeeping([visited([100, 279])], 200)).toMatchObject({ early: 1, kept: 0 });
    expect(scheduleKeeping([visited([100, 320, 541])], 200)).toMatchObject({ kept: 1, late: 1 });
  });

  it('has nothing due before the first time', () => {
    expect(scheduleKeeping([visited([100])], 200)).toMatchObject({ due: 0 });
    expect(scheduleKeeping([visited([])], 200)).toEqual({ due: 0, kept: 0, early: 0, late: 0, overdue: 0 });
  });

  it('begins the interval anew where a failure renewed the item', () => {
    const asset = visited([100, 400], { starts: [100, 210, 400] });
    expect(scheduleKeeping([asset], 200)).toMatchObject({ kept: 1, late: 0 });
  });

  it('tells what is overdue today, not what has just come due', () => {
    expect(scheduleKeeping([visited([700])], 200)).toMatchObject({ overdue: 1 });
    expect(scheduleKeeping([visited([781])], 200)).toMatchObject({ overdue: 0 });
  });

  it('looks only at the time in which the schedule was in force', () => {
    expect(scheduleKeeping([visited([100, 300, 800], { from: 500 })], 200)).toMatchObject({
      due: 1,
      late: 1,
    });
  });
});
