import { describe, expect, it } from 'vitest';
import { fittedRowsText, parseFittedRows, refuseFittedRows } from '~/models/fitted-rows';

describe('a list of fitted items', () => {
  it('is read line by line, whatever the sign and the spaces, into order of time', () => {
    const rows = [
      { fittedOn: '2024-03-01', count: 48 },
      { fittedOn: '2025-01-10', count: 20 },
    ];
    expect(parseFittedRows('2025-01-10 × 20\r\n\r\n  2024-03-01x48 ')).toEqual({ rows });
    expect(parseFittedRows('2024-03-01 x 48; 2025-01-10 * 20')).toEqual({ rows });
    expect(parseFittedRows(fittedRowsText(rows))).toEqual({ rows });
    expect(parseFittedRows(' \n')).toEqual({ rows: [] });
  });

  it.each([
    ['48 in March', 'unreadable'],
    ['2024-03-01 x 0', 'unreadable'],
    ['2024-03-01 x -4', 'unreadable'],
    ['2024-03-01 x 4.5', 'unreadable'],
    ['2024-02-30 x 4', 'no-such-day'],
    ['2024-03-01 x 4\n2024-03-01 x 5', 'twice'],
  ])('refuses %j', (text, code) => {
    expect(parseFittedRows(text)).toMatchObject({ refusal: { code } });
  });

  it('fits the asset: its quantity, its service and the opening of its watch', () => {
    const asset = { quantity: 10, inServiceOn: '2020-01-01', watchedFrom: '2024-01-01' };
    const refuse = (fittedOn: string, count: number) => refuseFittedRows(asset, [{ fittedOn, count }])?.code;
    expect(refuse('2020-01-01', 10)).toBeUndefined();
    expect(refuse('2024-01-01', 1)).toBeUndefined();
    expect(refuse('2019-12-31', 1)).toBe('before-service');
    expect(refuse('2024-01-02', 1)).toBe('after-opening');
    expect(refuse('2023-01-01', 11)).toBe('too-many');
  });
});
