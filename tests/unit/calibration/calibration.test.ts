import { describe, expect, it } from 'vitest';
import { falseAlarms, timeToAlarm } from '../../calibration/alarms';
import { coverage, type IntervalName } from '../../calibration/coverage';
import { regret } from '../../calibration/regret';
import { falseDiscovery, testSizes, verdictShares } from '../../calibration/tests-and-verdicts';
import { seededRandom } from '../../support/seeded-random';

/** Three standard errors of so many runs, around a share. */
const within = (share: number, runs: number) => 3 * Math.sqrt((share * (1 - share)) / runs);

describe('the short calibration', () => {
  it.each([1, 2])('intervals hold the truth as often as they say, at shape %i', (shape) => {
    const runs = 200;
    const rows = coverage(seededRandom(11), shape, 40, runs);
    const shareOf = (name: IntervalName) => rows.find(({ interval }) => interval === name)?.share;
    const names: IntervalName[] = ['shape', 'mean-life', 'tenth-gone', 'hazard-band'];
    for (const name of shape === 1 ? [...names, 'slope' as const, 'mean-time' as const] : names) {
      expect(shareOf(name), name).toBeGreaterThan(0.9 - within(0.9, runs));
      expect(shareOf(name), name).toBeLessThan(0.9 + within(0.9, runs));
    }
    // Whole numbers of failures: the range may hold more than it says, not less.
    expect(shareOf('forecast')).toBeGreaterThan(0.9 - within(0.9, runs));
  });

  it('Laplace and age-rank tests reject one time in twenty without cause', () => {
    const { laplace, ageRank } = testSizes(seededRandom(12), 400);
    for (const { share } of [laplace, ageRank])
      expect(Math.abs(share - 0.05)).toBeLessThan(within(0.05, 400));
  });

  it('tells memoryless from wearing classes', () => {
    expect(verdictShares(seededRandom(13), 1, 200).memoryless.share).toBeGreaterThan(
      0.79 - within(0.79, 200),
    );
    expect(verdictShares(seededRandom(14), 2, 100)['wear-out'].share).toBeGreaterThan(0.98);
  });

  it('is wrong about at most one in ten of the classes it calls wear-out', () => {
    const { mean, standardError } = falseDiscovery(seededRandom(15), 8);
    expect(mean - 3 * standardError).toBeLessThan(0.1);
  });

  it('raises no alarm on memoryless classes but for one in twenty, and finds wearing ones', () => {
    const { plain, raised } = falseAlarms(seededRandom(16), 60);
    for (const { share } of [...Object.values(plain), raised]) {
      expect(share).toBeLessThan(0.05 + within(0.05, 60));
    }
    expect(timeToAlarm(seededRandom(17), 2, 40).raisedWithinWatch.share).toBeGreaterThan(0.95);
  });

  it('advises an interval near the best one once there are failures enough', () => {
    const { median, runToFailure } = regret(seededRandom(18), 3, 40, 40);
    expect(median).toBeLessThan(0.05);
    expect(runToFailure).toBeGreaterThan(0.5);
  });
});
