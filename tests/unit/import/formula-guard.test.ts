import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { guardFormula, unguardFormula } from '~/models/import-formula-guard';

describe('guardFormula', () => {
  it.each(['=1+1', '+44 20', '-3', '@SUM(A1)', '\t=1', '\r=1', '＝1'])('makes %j harmless', (cell) => {
    expect(guardFormula(cell)).toBe(`'${cell}`);
  });

  it.each(['', 'plain', '2026-03-14', "it's", "'quoted'", '5 - 3'])('leaves %j as it is', (cell) => {
    expect(guardFormula(cell)).toBe(cell);
  });

  it('is undone to the letter, whatever the cell', () => {
    const cell = fc.oneof(
      fc.string(),
      fc.string({ unit: fc.constantFrom("'", '=', '+', '-', '@', '\t', 'a') }),
    );
    fc.assert(
      fc.property(cell, (text) => {
        expect(unguardFormula(guardFormula(text))).toBe(text);
        expect(guardFormula(text)).not.toMatch(/^[=+\-@\t\r\n]/);
      }),
    );
  });
});
