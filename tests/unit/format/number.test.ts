import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import {
  formatAlike,
  formatClock,
  formatCount,
  formatFixed,
  formatInterval,
  formatNoun,
  formatNumber,
  formatP,
  formatPercent,
  formatQuantity,
  formatSpanDays,
  formatTrimmed,
} from '~/format/number';

const T = '\u202f';

describe('formatNumber', () => {
  it.each([
    [1.399579, '1.40'],
    [0.07914, '0.0791'],
    [26296.8, `26${T}297`],
    [553.643, '554'],
    [9.996, '10.0'],
    [-0.84, '−0.840'],
    [0, '0'],
    [-0, '0'],
    [1234567, `1${T}234${T}567`],
    [1.234e-9, `1.23${T}×${T}10⁻⁹`],
    [-5e20, `−5.00${T}×${T}10²⁰`],
    [NaN, 'not known'],
    [Infinity, 'not known'],
  ])('writes %s as %s', (value, text) => expect(formatNumber(value)).toBe(text));

  it('never writes a minus zero, a hyphen for a minus, or NaN', () => {
    fc.assert(
      fc.property(fc.double(), fc.integer({ min: 0, max: 6 }), (value, decimals) => {
        for (const text of [formatFixed(value, decimals), formatNumber(value), formatTrimmed(value)]) {
          expect(text).not.toMatch(/^−0(\.0*)?$|-|NaN|Infinity/);
        }
      }),
    );
  });
});

it('trims zeros that say nothing, and only those', () => {
  expect(formatTrimmed(1.5)).toBe('1.5');
  expect(formatTrimmed(12)).toBe('12');
  expect(formatTrimmed(100)).toBe('100');
  expect(formatTrimmed(1200)).toBe(`1${T}200`);
});

it('writes an estimate and its interval with the same decimals', () => {
  const format = formatAlike([0.98, 0.784, 1.23]);
  expect([0.98, 0.784, 1.23].map(format)).toEqual(['0.98', '0.78', '1.23']);
  expect(formatAlike([null, NaN])(0.5)).toBe('0.500');
});

it('counts', () => {
  expect(formatCount(28)).toBe('28');
  expect(formatCount(-0.2)).toBe('0');
  expect(formatNoun(1, 'failure')).toBe('1 failure');
  expect(formatNoun(0, 'failure')).toBe('0 failures');
  expect(formatNoun(2, 'battery', 'batteries')).toBe('2 batteries');
});

it.each([
  [0.78, `78${T}%`],
  [0, `0${T}%`],
  [1, `100${T}%`],
  [0.003, `under 1${T}%`],
  [0.998, `over 99${T}%`],
  [NaN, 'not known'],
])('writes the share %s as %s', (share, text) => expect(formatPercent(share)).toBe(text));

it.each([
  [0.4, 'p = 0.40'],
  [0.0123, 'p = 0.012'],
  [0.0001, 'p < 0.001'],
])('writes p %s as %s', (p, text) => expect(formatP(p)).toBe(text));

it('writes intervals with open ends', () => {
  expect(formatInterval(1.0949, 1.7553)).toBe('1.09 to 1.76');
  expect(formatInterval(1.0949, null)).toBe('at least 1.09');
  expect(formatInterval(1.0949, Infinity)).toBe('at least 1.09');
  expect(formatInterval(null, 1.7553)).toBe('at most 1.76');
  expect(formatInterval(null, null)).toBe('not known');
});

it('writes durations', () => {
  expect(formatQuantity(13, 'month')).toBe('13 months');
  expect(formatQuantity(1, 'month')).toBe('1 month');
  expect(formatQuantity(1.5, 'month')).toBe('1.5 months');
  expect(formatClock(188.2, 'days')).toBe('188 days');
  expect(formatClock(26296.8, 'hours')).toBe(`26${T}297${T}h`);
  expect(formatSpanDays(45)).toBe('45 days');
  expect(formatSpanDays(395)).toBe('13 months');
  expect(formatSpanDays(1534)).toBe('4.2 years');
});
