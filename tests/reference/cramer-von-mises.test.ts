import { expect, test } from 'vitest';
import { cramerVonMises } from '~/reliability/cramer-von-mises';
import { crowAmsaaSlope } from '~/reliability/crow-amsaa';
import { readOneHistory } from '../support/read-check-data';

test('growth test of MIL-HDBK-189: statistic 0.091 with unbiased slope 0.690', () => {
  // Source: MIL-HDBK-189 (1981), Appendix C: 27 failures of a growth test, window 0–300 h.
  const histories = readOneHistory('growth-test', 300);
  const check = cramerVonMises(histories, crowAmsaaSlope(histories)?.shape ?? NaN);
  expect(check?.statistic).toBeCloseTo(0.091, 3);
  expect(check?.unbiasedSlope).toBeCloseTo(0.69, 3);
  expect(check?.rejected).toBe(false);
  // Printed there for 27 failures at 5 %: between 0.217 (20) and 0.218 (30).
  expect(check?.criticalAtFivePercent).toBe(0.217);
});
