import { expect } from '@playwright/test';

/** Expects a number within a distance of another. */
export function expectNear(actual: number | undefined, expected: number, distance: number): void {
  expect(actual).toBeDefined();
  expect(Math.abs((actual ?? Number.NaN) - expected), `${actual} against ${expected}`).toBeLessThan(distance);
}
