import { judgeVerdict, type Verdict } from '~/advice/verdict';
import { ageRankTest } from '~/reliability/age-rank';
import { assetHistories } from '~/reliability/asset-histories';
import { benjaminiHochberg } from '~/reliability/benjamini-hochberg';
import { fitExponential } from '~/reliability/exponential';
import { laplaceTest } from '~/reliability/laplace';
import { lifeHistories } from '~/reliability/life-histories';
import { likelihoodRatio } from '~/reliability/likelihood-ratio';
import { fitPowerLaw } from '~/reliability/power-law';
import type { Random } from '../support/seeded-random';
import { simulateClass, usualClass } from '../support/simulate-class';
import { shareOf, type Share } from './share';

/** How often the tests reject at 5 % where nothing is to be found. */
export function testSizes(random: Random, runs: number): { laplace: Share; ageRank: Share } {
  const laplace: boolean[] = [];
  const ageRank: boolean[] = [];
  for (let run = 0; run < runs; run += 1) {
    const positions = simulateClass(random, { ...usualClass, shape: 1 });
    laplace.push((laplaceTest(assetHistories(positions).histories)?.pTwoSided ?? 1) < 0.05);
    ageRank.push((ageRankTest(positions).pTwoSided ?? 1) < 0.05);
  }
  return { laplace: shareOf(laplace), ageRank: shareOf(ageRank) };
}

interface Judged {
  readonly interval: { low: number; high: number } | null;
  readonly failures: number;
  readonly pWearOut: number;
}

function judgeable(random: Random, shape: number): Judged {
  const { histories } = lifeHistories(simulateClass(random, { ...usualClass, shape }));
  const fit = fitPowerLaw(histories);
  const exponential = fitExponential(histories);
  if (fit.kind !== 'fit' || exponential === null) return { interval: null, failures: 0, pWearOut: 1 };
  return {
    interval: { low: fit.interval.low ?? 0, high: fit.interval.high ?? Infinity },
    failures: fit.failures,
    pWearOut: likelihoodRatio(fit, exponential).pWearOut,
  };
}

function verdictOf({ interval, failures }: Judged, wearOutPasses: boolean): Verdict {
  return judgeVerdict({ failures, shapeInterval: interval, wearOutPasses });
}

/** Shares of the verdicts on classes of one shape, each alone in its run. */
export function verdictShares(random: Random, shape: number, runs: number): Record<Verdict, Share> {
  const seen = Array.from({ length: runs }, () => {
    const judged = judgeable(random, shape);
    return verdictOf(judged, judged.pWearOut <= 0.1);
  });
  const share = (verdict: Verdict) => shareOf(seen.map((one) => one === verdict));
  return {
    'wear-out': share('wear-out'),
    memoryless: share('memoryless'),
    'early-life': share('early-life'),
    undecided: share('undecided'),
  };
}

/** Mean share of false ones among the classes a run calls wear-out; half of the 40 classes of a run wear out. */
export function falseDiscovery(
  random: Random,
  runs: number,
): { mean: number; standardError: number; runs: number } {
  const proportions = Array.from({ length: runs }, () => {
    const classes = Array.from({ length: 40 }, (_, index) => ({
      wears: index < 20,
      judged: judgeable(random, index < 20 ? 1.8 : 1),
    }));
    const passes = benjaminiHochberg(
      classes.map(({ judged }) => judged.pWearOut),
      0.1,
    );
    const called = classes.filter(({ judged }, index) => verdictOf(judged, passes[index]!) === 'wear-out');
    return called.length === 0 ? 0 : called.filter(({ wears }) => !wears).length / called.length;
  });
  const mean = proportions.reduce((sum, one) => sum + one, 0) / runs;
  const variance = proportions.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (runs - 1);
  return { mean, standardError: Math.sqrt(variance / runs), runs };
}
