/**
 * Calibration of what Intervale says, by simulation from fixed seeds: `npm run calibrate`.
 *
 * Writes app/advice/calibration.json (the figures, for the product) and tests/calibration/figures.md (the same
 * as tables, for people). Takes a few minutes; the short version is tests/unit/calibration.
 */
import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { seededRandom } from '../support/seeded-random';
import { falseAlarms, timeToAlarm } from './alarms';
import { coverage } from './coverage';
import { figuresInMarkdown } from './figures';
import { regret } from './regret';
import { falseDiscovery, testSizes, verdictShares } from './tests-and-verdicts';

const shapes = [0.6, 1, 2, 3];
const failureCounts = [5, 10, 20, 40, 80];

const figures = {
  coverage: shapes.flatMap((shape, row) =>
    failureCounts.flatMap((failures, column) =>
      coverage(seededRandom(1000 + 10 * row + column), shape, failures, 1500),
    ),
  ),
  testSizes: testSizes(seededRandom(2000), 2000),
  verdicts: {
    memoryless: verdictShares(seededRandom(3000), 1, 1000),
    wearOut: verdictShares(seededRandom(3001), 2, 1000),
    falseDiscovery: falseDiscovery(seededRandom(3002), 100),
  },
  alarms: {
    memorylessYear: falseAlarms(seededRandom(4000), 500),
    untilWearOut: timeToAlarm(seededRandom(4001), 2, 500),
  },
  regret: [2, 3].flatMap((shape, row) =>
    failureCounts.map((failures, column) =>
      regret(seededRandom(5000 + 10 * row + column), shape, failures, 400),
    ),
  ),
};
export type Figures = typeof figures;

const fourDigits = (_: string, value: unknown) =>
  typeof value === 'number' && Number.isFinite(value) ? Number(value.toPrecision(4)) : value;
const path = (relative: string) => fileURLToPath(new URL(relative, import.meta.url));
writeFileSync(path('../../app/advice/calibration.json'), `${JSON.stringify(figures, fourDigits, 2)}\n`);
writeFileSync(path('figures.md'), figuresInMarkdown(figures));
console.log('Wrote app/advice/calibration.json and tests/calibration/figures.md.');
