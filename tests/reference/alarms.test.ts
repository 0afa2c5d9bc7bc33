import { expect, test } from 'vitest';
import { eBenjaminiHochberg } from '~/reliability/e-benjamini-hochberg';
import { rebuildTrendAlarm, trendAlarm } from '~/reliability/trend-alarm';

test('trend alarm of a worked set of twelve failures', () => {
  // Source: computed once with numpy from the formula of the test martingale.
  const exposures = [310, 520, 640, 720, 810, 870, 930, 975, 1010, 1040, 1075, 1100];
  const alarm = trendAlarm(rebuildTrendAlarm(exposures));
  expect(alarm.failures).toBe(12);
  expect(alarm.sum).toBeCloseTo(3.974692, 6);
  expect(alarm.rising.e).toBeCloseTo(29.0485, 4);
  expect(alarm.falling.e).toBeCloseTo(0.0770427, 7);
});

test('e-BH raises the largest k with E at or above K/(alpha k)', () => {
  // Worked by hand from Wang & Ramdas 2022: K = 4, alpha = 0.05 asks for 80, 40, 26.67, 20.
  const raised = (es: number[]) => eBenjaminiHochberg(es.map(Math.log), 0.05);
  expect(raised([30, 90, 27, 1])).toEqual([true, true, true, false]);
  expect(raised([30, 70, 20, 1])).toEqual([false, false, false, false]);
  expect(raised([20, 20, 20, 20])).toEqual([true, true, true, true]);
  expect(raised([20])).toEqual([true]);
  expect(raised([19.9])).toEqual([false]);
  expect(raised([])).toEqual([]);
});
