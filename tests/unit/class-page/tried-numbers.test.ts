import { describe, expect, it } from 'vitest';
import { fieldsOfTheNight, tryNumbers } from '~/components/class-page/tried-numbers';
import { priceSchedule, type ScheduleInput } from '~/advice/price-schedule';
import { summariseLives } from '~/advice/life-summary';
import { fitPowerLaw } from '~/reliability/power-law';
import { lifeHistories } from '~/reliability/life-histories';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const { histories } = lifeHistories(simulateClass(seededRandom(7), { ...usualClass, shape: 3 }));
const input: ScheduleInput = {
  clock: 'calendar-days',
  fit: fitPowerLaw(histories),
  lives: summariseLives(histories),
  patchedShare: 0,
  costs: { plannedMinor: 18_000, failureMinor: 145_050, groupPlannedMinor: null },
  current: { interval: 730, task: null },
  positions: 30,
  unitsAYear: 365.25,
  isGroup: false,
  maskedAge: null,
  hidden: null,
};
const schedule = priceSchedule(input);
const context = { schedule, clock: 'calendar-days', currency: 'GBP' } as const;

describe('the fields of trying a number', () => {
  it('begin with the night’s own numbers, which give the night’s own answer', () => {
    if (schedule.kind !== 'priced') throw new Error('the simulated class is priced');
    const fields = fieldsOfTheNight(context);
    expect(fields).toMatchObject({ planned: '180.00', failure: '1450.50' });
    const tried = tryNumbers(fields, context);
    expect(tried).toMatchObject({ kind: 'priced', change: schedule.changes.best });
  });

  it('take an empty interval as run to failure', () => {
    if (schedule.kind !== 'priced') throw new Error('the simulated class is priced');
    const tried = tryNumbers({ ...fieldsOfTheNight(context), interval: ' ' }, context);
    expect(tried).toMatchObject({ kind: 'priced', interval: null, change: schedule.changes.stop });
  });

  it('are empty for costs nobody has given', () => {
    const without = priceSchedule({
      ...input,
      costs: { plannedMinor: null, failureMinor: null, groupPlannedMinor: null },
    });
    expect(fieldsOfTheNight({ ...context, schedule: without })).toEqual({
      interval: '24',
      planned: '',
      failure: '',
    });
  });

  it.each([
    [{ interval: '0' }, 'interval'],
    [{ interval: 'soon' }, 'interval'],
    [{ planned: '-3' }, 'planned'],
    [{ planned: '0' }, 'planned'],
    [{ failure: '1,2,3' }, 'failure'],
  ] as const)('say what is wrong with %j beside it', (differences, field) => {
    const tried = tryNumbers({ ...fieldsOfTheNight(context), ...differences }, context);
    expect(tried.kind === 'errors' && Object.keys(tried.errors)).toEqual([field]);
  });
});
