import { describe, expect, it } from 'vitest';
import { savingWords, sureWords } from '~/components/changes/change-words';

const words = (value: number, low: number, high: number) =>
  savingWords({ saving: { value, low, high } }, 'GBP');

describe('what a change is expected to save', () => {
  it('stands with its range', () => {
    expect(words(280_000, 210_000, 340_000)).toBe('£2\u202f800 a year (£2\u202f100 to £3\u202f400)');
  });

  it('keeps the sign of a range that reaches below zero beside its amount', () => {
    expect(words(50_000, -20_000, 90_000)).toBe('£500 a year (\u2212\u2060£200 to £900)');
  });

  it('is called a cost where it is one, without a sign to puzzle over', () => {
    expect(words(-50_000, -90_000, -20_000)).toBe('costs £500 a year more (£200 to £900)');
    expect(words(-50_000, -90_000, 20_000)).toBe('costs £500 a year more (from £900 more to £200 less)');
  });

  it('says when there is no price', () => {
    expect(savingWords({ saving: null }, 'GBP')).toBe('not priced');
    expect(sureWords({ share: null })).toBe('not priced');
    expect(sureWords({ share: 0.93 })).toContain('93');
  });
});
