import { expect, test } from 'vitest';
import type { History } from '~/reliability/history';
import { meanCumulativeFunction } from '~/reliability/mean-cumulative-function';
import { readValveSeats } from '../support/read-check-data';

const at = (histories: History[], time: number) =>
  meanCumulativeFunction(histories, 0.9).find((point) => point.time === time);

test('valve seats with one replacement an engine and day, as survfit counts them', () => {
  // Source: R survival, survfit(Surv(start, stop, status) ~ 1, id = id, robust = TRUE): an engine's second
  // replacement at one time (402 at 139 h, 328 at 653 h) makes an interval of no length and is dropped there.
  const histories = readValveSeats().map((engine) => ({
    ...engine,
    failures: [...new Set(engine.failures)],
  }));
  expect(histories).toHaveLength(41);
  expect(at(histories, 326)?.mean).toBeCloseTo(0.4878, 5);
  expect(at(histories, 653)?.mean).toBeCloseTo(1.40719, 5);
  expect(at(histories, 326)?.standardError).toBeCloseTo(0.104177759695, 10);
  expect(at(histories, 653)?.standardError).toBeCloseTo(0.251245492879, 10);
});

test('valve seats with all 48 replacements', () => {
  // Source: the definition (Nelson 2003) and the variance of Lawless & Nadeau 1995 summed out term by term in R.
  const histories = readValveSeats();
  expect(at(histories, 326)?.mean).toBeCloseTo(21 / 41, 12);
  expect(at(histories, 653)?.mean).toBeCloseTo(1.542687513557, 11);
  expect(at(histories, 326)?.standardError).toBeCloseTo(0.109739571761, 11);
  expect(at(histories, 653)?.standardError).toBeCloseTo(0.311656074751, 11);
  expect(at(histories, 653)).toMatchObject({ failures: 2, watched: 9 });
});
