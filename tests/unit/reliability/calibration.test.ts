import { describe, expect, it } from 'vitest';
import { ageRankTest } from '~/reliability/age-rank';
import { assetHistories } from '~/reliability/asset-histories';
import { laplaceTest } from '~/reliability/laplace';
import { lifeHistories } from '~/reliability/life-histories';
import { fitPowerLaw } from '~/reliability/power-law';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const runs = 1500;

/** Share of the runs of which `holds` is true, on classes of the given slope. */
function share(seed: number, shape: number, holds: (positions: ReturnType<typeof simulateClass>) => boolean) {
  const random = seededRandom(seed);
  let count = 0;
  for (let run = 0; run < runs; run += 1) {
    if (holds(simulateClass(random, { ...usualClass, shape }))) count += 1;
  }
  return count / runs;
}

describe('calibration on 30 positions over three years', () => {
  it.each([
    { shape: 1, seed: 11 },
    { shape: 2, seed: 12 },
  ])('the 90 % interval of the slope holds the true $shape nine times in ten', ({ shape, seed }) => {
    const coverage = share(seed, shape, (positions) => {
      const fit = fitPowerLaw(lifeHistories(positions).histories);
      if (fit.kind !== 'fit') return false;
      return (fit.interval.low ?? 0) <= shape && shape <= (fit.interval.high ?? Infinity);
    });
    expect(coverage).toBeGreaterThanOrEqual(0.87);
    expect(coverage).toBeLessThanOrEqual(0.93);
  });

  it('the age-rank test rejects one memoryless class in twenty at 5 %', () => {
    const size = share(13, 1, (positions) => (ageRankTest(positions).pTwoSided ?? 1) < 0.05);
    expect(size).toBeGreaterThanOrEqual(0.035);
    expect(size).toBeLessThanOrEqual(0.065);
  });

  it('the age-rank test finds a slope of 2', () => {
    const power = share(14, 2, (positions) => (ageRankTest(positions).pOldFirst ?? 1) < 0.05);
    expect(power).toBeGreaterThan(0.95);
  });

  it('the Laplace test rejects one class without trend in twenty at 5 %', () => {
    const size = share(15, 1, (positions) => {
      const test = laplaceTest(assetHistories(positions).histories);
      return (test?.pTwoSided ?? 1) < 0.05;
    });
    expect(size).toBeGreaterThanOrEqual(0.035);
    expect(size).toBeLessThanOrEqual(0.065);
  });
});
