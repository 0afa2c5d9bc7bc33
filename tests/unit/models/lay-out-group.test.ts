import { describe, expect, it } from 'vitest';
import { type Group, type GroupEvent, layOutGroup } from '~/models/lay-out-group';
import { lifeHistories } from '~/reliability/life-histories';
import { calendarUsage } from '~/reliability/usage';

/** In service on day 0, watched over days 100 to 1100. */
const frame = {
  inServiceAt: 0,
  watchFrom: 100,
  watchTo: 1100,
  usage: calendarUsage,
  halfResolutionDays: 0.5,
};
const watchedSinceService = { ...frame, watchFrom: 0 };

const group = (differences: Partial<Group>): Group => ({
  id: 'lamps',
  quantity: 3,
  fitted: [],
  frame,
  events: [],
  ...differences,
});

const failure = (at: number, itemFittedAt: number | null = null): GroupEvent => ({
  at,
  kind: 'failure-renewed',
  mode: null,
  itemFittedAt,
  items: 1,
});

const renewal = (at: number, items: number | null, itemFittedAt: number | null = null): GroupEvent => ({
  at,
  kind: 'planned-renewal',
  mode: null,
  itemFittedAt,
  items,
});

/** Watched lives as [entry age, exit age, ended by], in an order of their own. */
const livesOf = (laidOut: ReturnType<typeof layOutGroup>) =>
  lifeHistories(laidOut.positions)
    .histories.map(({ entry, exit, endedBy }) => [entry, exit, endedBy] as const)
    .sort((a, b) => a[0] - b[0] || a[1] - b[1]);

describe('a group asset', () => {
  it('ends the life that began on the named day', () => {
    const laidOut = layOutGroup(
      group({
        fitted: [
          { at: 20, count: 1 },
          { at: 60, count: 2 },
        ],
        events: [failure(300, 60), failure(500, 20), failure(700, 300)],
      }),
    );
    expect(laidOut).toMatchObject({
      agesKnown: true,
      itemsOfUnknownAge: 0,
      failures: 3,
      undatedFailures: 0,
    });
    expect(livesOf(laidOut)).toEqual([
      [0, 400, 'failure'],
      [0, 400, 'watch-end'],
      [0, 600, 'watch-end'],
      [40, 240, 'failure'],
      [40, 1040, 'watch-end'],
      [80, 480, 'failure'],
    ]);
  });

  it('needs no named day while all items are of one age', () => {
    const all = layOutGroup(group({ frame: watchedSinceService, events: [failure(400)] }));
    expect(all).toMatchObject({ agesKnown: true, itemsOfUnknownAge: 0, undatedFailures: 0 });
    expect(livesOf(all)).toEqual([
      [0, 400, 'failure'],
      [0, 700, 'watch-end'],
      [0, 1100, 'watch-end'],
      [0, 1100, 'watch-end'],
    ]);
    const listed = layOutGroup(group({ fitted: [{ at: 30, count: 3 }], events: [failure(400)] }));
    expect(listed.agesKnown).toBe(true);
  });

  it('takes part in the rate alone once an undated failure meets mixed ages', () => {
    const laidOut = layOutGroup(
      group({ frame: watchedSinceService, events: [failure(400), failure(600), renewal(900, 1)] }),
    );
    expect(laidOut).toMatchObject({
      agesKnown: false,
      itemsOfUnknownAge: 3,
      failures: 2,
      undatedFailures: 1,
    });
    const events = laidOut.positions.flatMap((position) => position.events);
    expect(events.map(({ at, kind }) => [at, kind]).sort()).toEqual([
      [400, 'failure-patched'],
      [600, 'failure-patched'],
    ]);
  });

  it('dates the life of an item of unknown age by the record of its failure', () => {
    const laidOut = layOutGroup(group({ fitted: [{ at: 60, count: 2 }], events: [failure(300, 10)] }));
    expect(laidOut).toMatchObject({ agesKnown: true, itemsOfUnknownAge: 1 });
    expect(livesOf(laidOut)).toContainEqual([90, 290, 'failure']);
  });

  it('cannot tell lives apart when the day named is of no item in place', () => {
    const laidOut = layOutGroup(group({ fitted: [{ at: 60, count: 3 }], events: [failure(300, 10)] }));
    expect(laidOut).toMatchObject({ agesKnown: false, undatedFailures: 1 });
  });

  it('starts every life anew with a block renewal, so that no day need be named again', () => {
    const laidOut = layOutGroup(
      group({
        frame: watchedSinceService,
        events: [failure(200), renewal(500, null), failure(800)],
      }),
    );
    expect(laidOut).toMatchObject({ agesKnown: true, undatedFailures: 0 });
    expect(livesOf(laidOut)).toEqual([
      [0, 200, 'failure'],
      [0, 300, 'planned-renewal'],
      [0, 300, 'failure'],
      [0, 300, 'watch-end'],
      [0, 500, 'planned-renewal'],
      [0, 500, 'planned-renewal'],
      [0, 600, 'watch-end'],
      [0, 600, 'watch-end'],
    ]);
  });

  it('renews as many items of a named day as a planned renewal took', () => {
    const laidOut = layOutGroup(
      group({
        fitted: [
          { at: 20, count: 1 },
          { at: 60, count: 2 },
        ],
        events: [renewal(500, 2, 60)],
      }),
    );
    expect(laidOut.agesKnown).toBe(true);
    expect(livesOf(laidOut)).toEqual([
      [0, 600, 'watch-end'],
      [0, 600, 'watch-end'],
      [40, 440, 'planned-renewal'],
      [40, 440, 'planned-renewal'],
      [80, 1080, 'watch-end'],
    ]);
  });

  it('counts the items the list does not account for as of unknown age, and leaves those lives out', () => {
    const laidOut = layOutGroup(group({ quantity: 5, fitted: [{ at: 60, count: 2 }] }));
    expect(laidOut.positions).toHaveLength(5);
    expect(laidOut.itemsOfUnknownAge).toBe(3);
    expect(livesOf(laidOut)).toEqual([
      [40, 1040, 'watch-end'],
      [40, 1040, 'watch-end'],
    ]);
  });

  it('keeps to its quantity when the list says more', () => {
    expect(layOutGroup(group({ fitted: [{ at: 60, count: 9 }] })).positions).toHaveLength(3);
  });
});
