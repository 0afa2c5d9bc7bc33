import { describe, expect, it } from 'vitest';
import { crowAmsaaSlope } from '~/reliability/crow-amsaa';
import { laplaceTest } from '~/reliability/laplace';
import { militaryHandbookTest } from '~/reliability/military-handbook';
import { fitPowerLaw } from '~/reliability/power-law';
import { readOneHistory, readValveSeats } from '../support/read-check-data';

const fitted = (histories: Parameters<typeof fitPowerLaw>[0]) => {
  const fit = fitPowerLaw(histories);
  if (fit.kind !== 'fit') throw new Error(fit.reason.code);
  return fit;
};

describe('repair-times: NIST/SEMATECH e-Handbook 8.2.3.4 and 8.4.5.2', () => {
  const histories = readOneHistory('repair-times', 1500);

  it('gives U and X', () => {
    expect(laplaceTest(histories)?.u).toBeCloseTo(-1.32695, 5);
    const test = militaryHandbookTest(histories);
    expect(test?.x).toBeCloseTo(37.22808, 5);
    expect(test?.degreesOfFreedom).toBe(20);
  });

  it('gives the slope, unbiased too, with its exact interval', () => {
    const slope = crowAmsaaSlope(histories);
    expect(slope?.shape).toBeCloseTo(0.537229, 6);
    expect(slope?.unbiasedShape).toBeCloseTo(0.483506, 6);
    expect(slope?.interval.low).toBeCloseTo(0.291468, 6);
    expect(slope?.interval.high).toBeCloseTo(0.84373, 6);
  });

  it('gives the same slope by likelihood, with the profile interval', () => {
    const fit = fitted(histories);
    expect(fit.shape).toBeCloseTo(crowAmsaaSlope(histories)?.shape ?? NaN, 12);
    expect(fit.interval.low).toBeCloseTo(0.30399, 5);
    expect(fit.interval.high).toBeCloseTo(0.86708, 5);
  });
});

describe('growth-test: MIL-HDBK-189 (1981), Appendix C', () => {
  const histories = readOneHistory('growth-test', 300);

  it('gives slope, intensity and U', () => {
    const slope = crowAmsaaSlope(histories);
    expect(slope?.shape).toBeCloseTo(0.716, 3);
    expect(slope?.intensity).toBeCloseTo(0.454, 3);
    expect(slope?.unbiasedShape).toBeCloseTo(0.69, 3);
    expect(laplaceTest(histories)?.u).toBeCloseTo(-2.318, 3);
  });
});

describe('valve-seats: Nelson & Doganaksoy 1989 (R package survival, valveSeat)', () => {
  const histories = readValveSeats();

  it('gives U and X over 41 engines', () => {
    expect(histories).toHaveLength(41);
    expect(laplaceTest(histories)?.failures).toBe(48);
    expect(laplaceTest(histories)?.u).toBeCloseTo(2.378693, 6);
    expect(militaryHandbookTest(histories)?.x).toBeCloseTo(66.14835, 5);
    expect(militaryHandbookTest(histories)?.degreesOfFreedom).toBe(96);
  });

  it('gives the power law on the asset clock', () => {
    const fit = fitted(histories);
    expect(fit.shape).toBeCloseTo(1.399579, 6);
    expect(fit.scale).toBeCloseTo(553.643, 3);
    expect(fit.logLikelihood).toBeCloseTo(-346.4903, 4);
    expect(fit.interval.low).toBeCloseTo(1.09487, 5);
    expect(fit.interval.high).toBeCloseTo(1.75534, 5);
  });
});
