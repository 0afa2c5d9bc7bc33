import { bestAgeReplacement } from '~/reliability/age-replacement';
import { lifeHistories } from '~/reliability/life-histories';
import { fitPowerLaw } from '~/reliability/power-law';
import { weibullMeanLife } from '~/reliability/weibull';
import type { Random } from '../support/seeded-random';
import { simulateClass } from '../support/simulate-class';
import { costRate, priceRunToFailure } from './coverage';
import { quantileOf } from './share';

export interface RegretRow {
  readonly shape: number;
  /** Failures expected in a class. */
  readonly failures: number;
  readonly runs: number;
  /** How much dearer than the true best, as a share of it: median and nine in ten. */
  readonly median: number;
  readonly nineInTen: number;
  /** What running to failure would cost beyond the true best. */
  readonly runToFailure: number;
}

const scale = 900;
const watchedDays = 1096;

/** What following the interval that comes out best costs beyond the true best one, a failure ten times a renewal. */
export function regret(random: Random, shape: number, failures: number, runs: number): RegretRow {
  const truth = { shape, scale };
  const positions = Math.max(2, Math.round((failures * weibullMeanLife(truth)) / watchedDays));
  const best = costRate(truth, bestAgeReplacement(truth, { planned: 10_000, failure: 100_000 }));
  const excesses = Array.from({ length: runs }, () => {
    const { histories } = lifeHistories(simulateClass(random, { shape, scale, positions, watchedDays }));
    const priced = priceRunToFailure(fitPowerLaw(histories), histories, positions);
    // Too close to call, or nothing to go by: nothing is proposed, and items go on to run to failure.
    const change = priced.kind === 'priced' ? priced.changes.best : null;
    const interval = change !== null && change.share >= 0.8 ? change.interval : null;
    return costRate(truth, interval) / best - 1;
  });
  return {
    shape,
    failures,
    runs,
    median: quantileOf(excesses, 0.5),
    nineInTen: quantileOf(excesses, 0.9),
    runToFailure: costRate(truth, null) / best - 1,
  };
}
