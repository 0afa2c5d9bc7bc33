import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { highestAmountMinor, moneyFieldText, parseMoney } from '~/models/money';

describe('reading an amount of money', () => {
  it.each([
    ['190', 'GBP', 19_000],
    ['190.5', 'GBP', 19_050],
    ['190,50', 'EUR', 19_050],
    [' 1 250.50 ', 'GBP', 125_050],
    ['0', 'GBP', 0],
    ['1250', 'JPY', 1250],
    ['1.250', 'KWD', 1250],
    ['0.29', 'GBP', 29],
  ])('%s %s is %i', (text, currency, minor) => {
    expect(parseMoney(text, currency)).toBe(minor);
  });

  it.each([
    ['1,250.50', 'GBP'],
    ['1,250', 'GBP'],
    ['12.5', 'JPY'],
    ['-5', 'GBP'],
    ['£5', 'GBP'],
    ['1e3', 'GBP'],
    ['', 'GBP'],
    ['.', 'GBP'],
    ['99999999999', 'GBP'],
  ])('%s %s is refused', (text, currency) => {
    expect(parseMoney(text, currency)).toBeUndefined();
  });

  it('reads back what a field shows, in every currency and to the last minor unit', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: highestAmountMinor }),
        fc.constantFrom('GBP', 'JPY', 'KWD'),
        (minor, currency) => parseMoney(moneyFieldText(minor, currency), currency) === minor,
      ),
    );
  });
});
