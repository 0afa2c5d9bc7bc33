import { describe, expect, it } from 'vitest';
import { findModes } from '~/advice/find-modes';
import { judgeModes, modeTestsOf } from '~/advice/judge-modes';
import { estimateLife, lifeEstimatesSchema } from '~/advice/life-estimates';
import { modesFindingsSchema } from '~/advice/mode-findings';
import type { History } from '~/reliability/history';
import { lifeHistories } from '~/reliability/life-histories';
import { lifeIntervals } from '~/reliability/life-intervals';
import { fitPowerLaw, type PowerLawFit } from '~/reliability/power-law';
import type { Position } from '~/reliability/position';
import { weibullB10, weibullMeanLife } from '~/reliability/weibull';
import { aPosition, anEvent } from '../../support/position';
import { seededRandom, weibullLife } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const modes = [
  { id: 'wear', name: 'Burnt' },
  { id: 'chance', name: 'Broken' },
  { id: 'rare', name: 'Stolen' },
  { id: 'never', name: 'Melted' },
];

/** Items that burn out by age (shape 3.5) or break by chance, whichever comes first; now and then nobody says which. */
function twoModes(seed: number, positions = 40): Position[] {
  const random = seededRandom(seed);
  return Array.from({ length: positions }, (_, index) => {
    const events = [];
    for (let fittedAt = 0; ;) {
      const [wear, chance] = [weibullLife(random, 3.5, 500), weibullLife(random, 1, 600)];
      const at = fittedAt + Math.min(wear, chance);
      if (at > 1500) break;
      events.push(anEvent(at, 'failure-renewed', { mode: wear < chance ? 'wear' : 'chance' }));
      fittedAt = at;
    }
    if (index < 2 && events[0]) events[0] = { ...events[0], mode: 'rare' };
    if (index === 2 && events[0]) events[0] = { ...events[0], mode: null };
    return aPosition({ id: `p${index}`, watchTo: 1500, events });
  });
}

function fitOf(histories: readonly History[]): PowerLawFit {
  const fit = fitPowerLaw(histories);
  if (fit.kind !== 'fit') throw new Error('expected a fit');
  return fit;
}

describe('failure modes', () => {
  const positions = twoModes(5);
  const findings = modesFindingsSchema.parse(JSON.parse(JSON.stringify(findModes(positions, modes))));

  it('analyses modes with at least five failures and counts the others', () => {
    expect(findings.each.map(({ name }) => name)).toEqual(['Burnt', 'Broken']);
    expect(findings.rare).toEqual([{ modeId: 'rare', name: 'Stolen', failures: 2 }]);
    expect(findings.failuresWithoutMode).toBe(1);
    const total = positions.reduce((sum, { events }) => sum + events.length, 0);
    expect(findings.each.reduce((sum, { failures }) => sum + failures, 0)).toBe(total - 3);
  });

  it('takes the other modes as censoring', () => {
    const { histories } = lifeHistories(positions, { mode: 'wear' });
    const [wear] = findings.each;
    expect(wear?.life).toEqual(lifeEstimatesSchema.parse(estimateLife(histories)));
    expect(wear?.life.fit.kind === 'fit' && wear.life.fit.shape).toBeGreaterThan(2.5);
    expect(wear?.ageRank.z).toBeGreaterThan(3);
    const chance = findings.each[1];
    expect(chance?.life.fit.kind === 'fit' && chance.life.fit.shape).toBeLessThan(1.4);
  });

  it('judges each mode like a class, with wear-out held to the run', () => {
    const tests = modeTestsOf(findings);
    expect(tests[0]).toBeLessThan(1e-6);
    expect(judgeModes(findings, [true, true]).map(({ verdict }) => verdict)).toEqual([
      'wear-out',
      'memoryless',
    ]);
    expect(judgeModes(findings, [false, true])[0]?.verdict).toBe('undecided');
  });

  it('does without any failure', () => {
    expect(findModes([aPosition()], modes)).toEqual({ each: [], rare: [], failuresWithoutMode: 0 });
  });

  it('says why a mode whose items are of unknown age has no fit', () => {
    const unknown = Array.from({ length: 6 }, (_, index) =>
      aPosition({
        id: `u${index}`,
        inServiceAt: -400,
        events: [anEvent(100, 'failure-patched', { mode: 'wear' })],
      }),
    );
    const [wear] = findModes(unknown, modes).each;
    expect(wear).toMatchObject({
      failures: 6,
      life: { fit: { kind: 'cannot-be-estimated', reason: 'No failure of known age.' }, meanLife: null },
      ageRank: { failures: 0, z: null, ageUnknown: 6 },
    });
    expect(judgeModes({ each: [wear!], rare: [], failuresWithoutMode: 0 }, [false])[0]?.verdict).toBe(
      'undecided',
    );
  });
});

describe('intervals of the mean life and the B10 life', () => {
  const { histories } = lifeHistories(simulateClass(seededRandom(21), { ...usualClass, shape: 1.6 }));
  const fit = fitOf(histories);
  const intervals = lifeIntervals(histories, fit);

  /** ln L(β, η) straight from its definition. */
  const logLikelihood = (shape: number, scale: number) =>
    histories.reduce((sum, { entry, exit, failures }) => {
      const hazards = failures.reduce(
        (logs, time) => logs + Math.log((shape / scale) * (time / scale) ** (shape - 1)),
        0,
      );
      return sum + hazards - ((exit / scale) ** shape - (entry / scale) ** shape);
    }, 0);

  it('are the range over the likelihood region, as a fine grid has it', () => {
    // 1.352772 is half the 90 % quantile of chi-squared on 1 df, 2.705543.
    const allowed = logLikelihood(fit.shape, fit.scale) - 1.352772;
    const seen = { mean: [Infinity, -Infinity], tenth: [Infinity, -Infinity] };
    for (let i = -90; i <= 90; i += 1) {
      for (let j = -90; j <= 90; j += 1) {
        const weibull = { shape: fit.shape * Math.exp(i / 180), scale: fit.scale * Math.exp(j / 250) };
        if (logLikelihood(weibull.shape, weibull.scale) < allowed) continue;
        const [mean, tenth] = [weibullMeanLife(weibull), weibullB10(weibull)];
        seen.mean = [Math.min(seen.mean[0]!, mean), Math.max(seen.mean[1]!, mean)];
        seen.tenth = [Math.min(seen.tenth[0]!, tenth), Math.max(seen.tenth[1]!, tenth)];
      }
    }
    const near = (value: number | null, expected: number) =>
      expect(Math.abs(value! / expected - 1)).toBeLessThan(0.01);
    near(intervals.meanLife.low, seen.mean[0]!);
    near(intervals.meanLife.high, seen.mean[1]!);
    near(intervals.tenthGone.low, seen.tenth[0]!);
    near(intervals.tenthGone.high, seen.tenth[1]!);
  });

  it('hold the estimates, and scale with the unit', () => {
    for (const [{ low, high }, value] of [
      [intervals.meanLife, weibullMeanLife(fit)],
      [intervals.tenthGone, weibullB10(fit)],
    ] as const) {
      expect(low).toBeLessThan(value);
      expect(high).toBeGreaterThan(value);
    }
    for (const unit of [1e-6, 24, 1e9]) {
      const scaled = histories.map(({ entry, exit, failures }) => ({
        entry: entry * unit,
        exit: exit * unit,
        failures: failures.map((time) => time * unit),
      }));
      const { meanLife, tenthGone } = lifeIntervals(scaled, fitOf(scaled));
      expect(meanLife.low! / unit / intervals.meanLife.low!).toBeCloseTo(1, 7);
      expect(tenthGone.high! / unit / intervals.tenthGone.high!).toBeCloseTo(1, 7);
    }
  });

  it('close in on the one age at which items fail where that is what the data say', () => {
    const near = Array.from({ length: 30 }, (_, index) => {
      const age = 1000 + 2 * index;
      return { entry: 0, exit: age, failures: [age] };
    });
    const { meanLife, tenthGone } = lifeIntervals(near, fitOf(near));
    // The mean of the ages is 1029.
    expect(meanLife.low).toBeGreaterThan(1015);
    expect(meanLife.high).toBeLessThan(1045);
    expect(tenthGone.low).toBeGreaterThan(970);
    expect(tenthGone.high).toBeLessThan(1029);
  });

  it('are finite or open, never NaN, with a single failure or tiny shapes', () => {
    const single = [{ entry: 0, exit: 100, failures: [40] }];
    const early = [
      { entry: 0, exit: 1e6, failures: [1e-4] },
      { entry: 0, exit: 1e6, failures: [1e5] },
    ];
    for (const data of [single, early]) {
      const { meanLife, tenthGone } = lifeIntervals(data, fitOf(data));
      for (const end of [meanLife.low, meanLife.high, tenthGone.low, tenthGone.high]) {
        expect(end === null || (Number.isFinite(end) && end > 0)).toBe(true);
      }
    }
  });

  it('cover the truth in about nine of ten classes with some 38 failures', () => {
    const random = seededRandom(77);
    const truth = { shape: 2, scale: usualClass.scale };
    let [mean, tenth] = [0, 0];
    const runs = 400;
    for (let run = 0; run < runs; run += 1) {
      const lives = lifeHistories(simulateClass(random, { ...usualClass, shape: truth.shape })).histories;
      const covering = lifeIntervals(lives, fitOf(lives));
      const holds = ({ low, high }: { low: number | null; high: number | null }, value: number) =>
        (low ?? 0) <= value && value <= (high ?? Infinity);
      if (holds(covering.meanLife, weibullMeanLife(truth))) mean += 1;
      if (holds(covering.tenthGone, weibullB10(truth))) tenth += 1;
    }
    for (const covered of [mean, tenth]) {
      expect(covered / runs).toBeGreaterThan(0.86);
      expect(covered / runs).toBeLessThan(0.94);
    }
  });
});
