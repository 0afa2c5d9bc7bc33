import { describe, expect, it } from 'vitest';
import { CellReader } from '~/models/import-cells';

const read = (cell: string) => new CellReader({ cell }, '2026-06-30');

describe('CellReader', () => {
  it('tells a column that is not there from an empty cell', () => {
    expect(read('x').date('other')).toBeUndefined();
    expect(read('  ').date('cell')).toBeNull();
    expect(read('  ').remarks).toEqual([]);
  });

  it.each(['2024-02-29', '1900-01-01', '2026-06-30'])('takes the day %s', (day) => {
    expect(read(day).date('cell')).toBe(day);
  });

  it.each([
    ['2026-02-30', 'There is no such day.'],
    ['2023-02-29', 'There is no such day.'],
    ['2026-13-01', 'There is no such day.'],
    ['0000-00-00', 'There is no such day.'],
    ['14/03/2026', 'This is not a date. Write year, month and day as 2026-03-14.'],
    ['2026-3-4', 'This is not a date. Write year, month and day as 2026-03-14.'],
    ['1899-12-31', 'This lies before 1900.'],
    ['2026-07-01', 'This lies in the future: today is 2026-06-30.'],
  ])('refuses the day %s', (day, reason) => {
    const reader = read(day);
    expect(reader.date('cell')).toBeNull();
    expect(reader.remarks).toEqual([{ column: 'cell', value: day, reason }]);
  });

  it.each([
    ['7.5', 7.5],
    ['24', 24],
    ['3.33333333', 3.3333],
  ])('takes %s hours a day', (text, hours) => {
    expect(read(text).hoursADay('cell')).toBe(hours);
  });

  it.each(['0', '0.00001', '24.1', '-8', '7,5', '1e2', 'eight'])('refuses %s hours a day', (text) => {
    const reader = read(text);
    expect(reader.hoursADay('cell')).toBeNull();
    expect(reader.remarks).toHaveLength(1);
  });

  it.each(['0', '1.5', '-2', '100001', '1e3', '٣'])('refuses the quantity %s', (text) => {
    const reader = read(text);
    expect(reader.wholeNumber('cell', 100_000)).toBeNull();
    expect(reader.remarks).toHaveLength(1);
  });

  it.each(['24:00', '9:05', '09:60', '09.05'])('refuses the time %s', (text) => {
    expect(read(text).timeOfDay('cell')).toBeNull();
  });

  it('counts the characters of a text that is too long', () => {
    const reader = read('x'.repeat(61));
    expect(reader.text('cell', 60)).toBeNull();
    expect(reader.remarks[0]?.reason).toBe('This has 61 characters; at most 60 are taken.');
    expect(read('x'.repeat(60)).text('cell', 60)).toBe('x'.repeat(60));
  });

  it('takes a choice in any capitals and with any joiner', () => {
    expect(read('Planned_Work').oneOf('cell', ['failure', 'planned work'])).toBe('planned work');
  });
});
