import { expect } from 'vitest';

/** Expects `actual` within `tolerance` of `expected`, relative to it (absolute where it is 0). */
export function expectClose(actual: number | null | undefined, expected: number, tolerance: number): void {
  if (actual === null || actual === undefined) throw new Error(`nothing where ${expected} was expected`);
  const error = Math.abs(actual - expected) / (expected === 0 ? 1 : Math.abs(expected));
  expect(error, `${actual} against ${expected}`).toBeLessThanOrEqual(tolerance);
}
