import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import { formatMoney, formatMoneyShort } from '~/format/money';

const T = '\u202f';

describe('formatMoney', () => {
  it.each([
    [190000, 'GBP', `£1${T}900`],
    [19050, 'GBP', '£190.50'],
    [5, 'GBP', '£0.05'],
    [-355000, 'GBP', `−£3${T}550`],
    [0, 'EUR', '€0'],
    [-0, 'EUR', '€0'],
    [1900, 'JPY', `JP¥1${T}900`],
    [123456789, 'CHF', `CHF${T}1${T}234${T}567.89`],
    [1234, 'KWD', `KWD${T}1.234`],
    [NaN, 'GBP', 'not known'],
  ])('writes %s minor units of %s as %s', (amount, currency, text) => {
    expect(formatMoney(amount, currency)).toBe(text);
  });

  it('shows pence always or never when asked', () => {
    expect(formatMoney(190000, 'GBP', 'always')).toBe(`£1${T}900.00`);
    expect(formatMoney(190050, 'GBP', 'never')).toBe(`£1${T}901`);
    expect(formatMoney(-40, 'GBP', 'never')).toBe('£0');
  });

  it('refuses what is no currency', () => {
    expect(() => formatMoney(1, 'pounds')).toThrow(RangeError);
  });

  it('keeps every digit of whole pounds', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1e12 }), (pounds) => {
        expect(formatMoney(pounds * 100, 'GBP').replaceAll(T, '')).toBe(`£${pounds}`);
      }),
    );
  });
});

it.each([
  [95000, '£950'],
  [2000000, '£20k'],
  [2034000, '£20.3k'],
  [125000000, '£1.25m'],
  [99999999, '£1m'],
  [50, '£0.50'],
  [0, '£0'],
  [-3400000, '−£34k'],
])('writes %s minor units shortly as %s', (amount, text) => {
  expect(formatMoneyShort(amount, 'GBP')).toBe(text);
});
