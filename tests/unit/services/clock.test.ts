import { afterEach, expect, it, vi } from 'vitest';
import { now, today } from '~/services/clock.server';

afterEach(() => vi.unstubAllEnvs());

function pin(instant: string, test = '1'): void {
  vi.stubEnv('INTERVALE_TEST', test);
  vi.stubEnv('INTERVALE_NOW', instant);
}

it('can be set in tests alone', () => {
  pin('2026-03-29T00:30:00Z');
  expect(now().toISOString()).toBe('2026-03-29T00:30:00.000Z');
  pin('2001-01-01T00:00:00Z', '');
  expect(now().getFullYear()).toBeGreaterThan(2001);
});

it('refuses what is no instant', () => {
  pin('yesterday');
  expect(now).toThrow(/INTERVALE_NOW/);
});

it.each([
  ['UTC', '2026-10-24'],
  ['Europe/London', '2026-10-25'],
  ['Pacific/Kiritimati', '2026-10-25'],
  ['America/New_York', '2026-10-24'],
])('says which day it is in %s', (zone, day) => {
  pin('2026-10-24T23:30:00Z');
  expect(today(zone)).toBe(day);
});

it('refuses a zone nobody knows', () => {
  expect(() => today('Mars/Olympus')).toThrow(/Unknown time zone/);
});
