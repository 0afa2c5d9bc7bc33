import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import type { History } from '~/reliability/history';
import { fitPowerLaw } from '~/reliability/power-law';
import { expectClose } from '../support/relative';
import { dataSetCount, generateDataSets } from './second-opinion/generate-data-sets';

/*
 * Fits of 300 seeded data sets beside those of R (survreg, and Newton's method on the full likelihood where
 * lives enter late). Source: second-opinion/fit.R, run by second-opinion/rerun.mjs; its output is fits.csv.
 */
const read = (name: string) => readFileSync(new URL(`./second-opinion/${name}`, import.meta.url), 'utf8');
const rowsOf = (text: string) =>
  text
    .trim()
    .split('\n')
    .slice(1)
    .map((line) => line.split(','));

test('the stored data sets are those of the generator', () => {
  expect(generateDataSets()).toBe(read('data-sets.csv'));
});

test('shape and scale agree with R to 1e-6, the log-likelihood to 1e-8', () => {
  const lives = new Map<string, History[]>();
  for (const [set = '', entry, exit, failed] of rowsOf(read('data-sets.csv'))) {
    const age = Number(exit);
    const life = { entry: Number(entry), exit: age, failures: failed === '1' ? [age] : [] };
    lives.set(set, [...(lives.get(set) ?? []), life]);
  }
  const answers = rowsOf(read('fits.csv'));
  expect(answers).toHaveLength(dataSetCount);
  for (const [set = '', , failures, shape, scale, logLikelihood] of answers) {
    const fit = fitPowerLaw(lives.get(set) ?? []);
    if (fit.kind !== 'fit') throw new Error(`set ${set}: ${fit.reason.code}`);
    expect(fit.failures).toBe(Number(failures));
    expectClose(fit.shape, Number(shape), 1e-6);
    expectClose(fit.scale, Number(scale), 1e-6);
    expectClose(fit.logLikelihood, Number(logLikelihood), 1e-8);
  }
});
