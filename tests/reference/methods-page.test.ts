import { describe, expect, it } from 'vitest';
import { ageMethods } from '~/components/methods/age-methods';
import type { CheckValue } from '~/components/methods/method';
import { scheduleMethods } from '~/components/methods/schedule-methods';
import { trendMethods } from '~/components/methods/trend-methods';
import { ageReplacementCostRate, bestAgeReplacement } from '~/reliability/age-replacement';
import { crowAmsaaSlope } from '~/reliability/crow-amsaa';
import { dispersion } from '~/reliability/dispersion';
import { expectedFailuresByAge } from '~/reliability/expected-failures';
import { fitExponential, meanTimeInterval } from '~/reliability/exponential';
import { failureFindingInterval } from '~/reliability/failure-finding';
import type { History } from '~/reliability/history';
import { laplaceTest } from '~/reliability/laplace';
import { likelihoodRatio } from '~/reliability/likelihood-ratio';
import { meanCumulativeFunction } from '~/reliability/mean-cumulative-function';
import { militaryHandbookTest } from '~/reliability/military-handbook';
import { bestMinimalRepairInterval } from '~/reliability/minimal-repair';
import { fitPowerLaw } from '~/reliability/power-law';
import { weibullRenewalFunction } from '~/reliability/renewal-function';
import { sparesNeeded } from '~/reliability/spares';
import { rebuildTrendAlarm, trendAlarm } from '~/reliability/trend-alarm';
import { compareTwoRates } from '~/reliability/two-rates';
import { formulaInMathMl } from '~/services/formula.server';
import { readCheckData, readLives, readOneHistory, readValveSeats } from '../support/read-check-data';

const repair = readOneHistory('repair-times', 1500);
const growth = readOneHistory('growth-test', 300);
const valves = readValveSeats();
const fans = readLives('generator-fans', 'hours', 'status');
const air = readCheckData('air-conditioning').map(({ hours = NaN }): History => ({
  entry: 0,
  exit: hours,
  failures: [hours],
}));
const lateEntries = readLives('late-entries', 'exit', 'failed');
const alarm = trendAlarm(rebuildTrendAlarm([310, 520, 640, 720, 810, 870, 930, 975, 1010, 1040, 1075, 1100]));
const rates = compareTwoRates({ failures: 4, exposure: 900 }, { failures: 15, exposure: 1200 }, 0.9);

function fitOf(histories: readonly History[]) {
  const fit = fitPowerLaw(histories);
  if (fit.kind !== 'fit') throw new Error(fit.reason.code);
  return fit;
}
const ratioOf = (histories: readonly History[]) =>
  likelihoodRatio(fitOf(histories), fitExponential(histories)!).statistic;
const fansInterval = () => {
  const { failures, exposure } = fitExponential(fans)!;
  return meanTimeInterval(failures, exposure);
};
const byAge = (shape: number, ratio: number) => {
  const costs = { planned: 1, failure: ratio };
  const life = { shape, scale: 1 };
  const best = bestAgeReplacement(life, costs);
  return {
    best,
    share: ageReplacementCostRate(best, life, costs) / ageReplacementCostRate(null, life, costs),
  };
};
const mcfAt = (time: number) =>
  meanCumulativeFunction(valves, 0.9).find((point) => point.time === time)?.mean;

/** Every value the page prints, computed anew. */
const computed: Record<string, () => number | null | undefined> = {
  'laplace-repair': () => laplaceTest(repair)?.u,
  'laplace-growth': () => laplaceTest(growth)?.u,
  'laplace-valves': () => laplaceTest(valves)?.u,
  'handbook-repair': () => militaryHandbookTest(repair)?.x,
  'handbook-valves': () => militaryHandbookTest(valves)?.x,
  'slope-repair': () => crowAmsaaSlope(repair)?.shape,
  'slope-repair-unbiased': () => crowAmsaaSlope(repair)?.unbiasedShape,
  'slope-repair-low': () => crowAmsaaSlope(repair)?.interval.low,
  'slope-repair-profile': () => fitOf(repair).interval.high,
  'slope-valves': () => fitOf(valves).shape,
  'mtbf-fans-low': () => fansInterval().low,
  'mtbf-fans-high': () => fansInterval().high,
  'mcf-valves-326': () => mcfAt(326),
  'mcf-valves-653': () => mcfAt(653),
  'alarm-sum': () => alarm.sum,
  'alarm-rising': () => alarm.rising.e,
  'alarm-falling': () => alarm.falling.e,
  'life-fans-shape': () => fitOf(fans).shape,
  'life-fans-scale': () => fitOf(fans).scale,
  'life-fans-low': () => fitOf(fans).interval.low,
  'life-fans-high': () => fitOf(fans).interval.high,
  'life-test': () => fitOf(readLives('life-test', 'hours', 'status')).shape,
  'life-late': () => fitOf(lateEntries).shape,
  'ratio-fans': () => ratioOf(fans),
  'ratio-air': () => ratioOf(air),
  dispersion: () =>
    dispersion(
      [3, 1, 0, 4, 2, 10, 1, 0, 2, 1].map((failures) => ({ failures, exposure: 700 })),
      0.05,
    )?.statistic,
  'age-replacement-2-5': () => byAge(2, 5).best,
  'age-replacement-3-10': () => byAge(3, 10).best,
  'age-replacement-cost': () => byAge(2, 5).share,
  'minimal-repair': () => bestMinimalRepairInterval({ shape: 2.5, scale: 1 }, { planned: 1, failure: 4 }),
  'renewal-1': () => weibullRenewalFunction({ shape: 2, scale: 1 }, 1),
  'renewal-2': () => weibullRenewalFunction({ shape: 2, scale: 1 }, 2),
  'finding-90': () => failureFindingInterval(0.9, 1),
  'finding-99': () => failureFindingInterval(0.99, 1),
  'forecast-new': () =>
    expectedFailuresByAge({ ages: [0], horizon: 2, plannedInterval: null }, { shape: 2, scale: 1 }, [], 0.9)
      .mean,
  spares: () => sparesNeeded(7.5, 0.95),
  'rates-ratio': () => rates.ratio,
  'rates-p': () => rates.p,
  'rates-low': () => rates.lower,
};

const methods = [trendMethods, ageMethods, scheduleMethods].flatMap((group) => group.methods);
const checks = methods.flatMap((method): readonly CheckValue[] => method.checks);

describe('the methods page', () => {
  it('prints no value that is not computed here, and none is left over', () => {
    expect(checks.map(({ id }) => id).sort()).toEqual(Object.keys(computed).sort());
  });

  for (const { id, what, value, source } of checks) {
    it(`gives ${value} for ${what} (${source})`, () => {
      const digits = value.split('.')[1]?.length ?? 0;
      const ours = computed[id]?.();
      expect(ours).toBeTypeOf('number');
      expect(Math.abs((ours ?? NaN) - Number(value))).toBeLessThanOrEqual(0.5001 * 10 ** -digits);
    });
  }

  it('has an anchor of its own for every method', () => {
    const ids = [...methods.map(({ id }) => id), 'question-1', 'question-2', 'question-3', 'calibration'];
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('draws every formula and symbol', () => {
    for (const { formulas, symbols } of methods) {
      for (const tex of [...formulas, ...symbols.map(([symbol]) => symbol)]) {
        expect(formulaInMathMl(tex, 'block')).toMatch(/^<math/);
      }
    }
  });
});
