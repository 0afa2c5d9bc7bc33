import type { CellRemark } from './import-types';

/** Cells of one row by the name of their column; a column the file does not have is not there. */
export type Cells = Readonly<Partial<Record<string, string>>>;

/** Longest name of a site, area, class, failure mode or item, and longest record number. */
export const nameMaxLength = 120;

const earliest = '1900-01-01';

/**
 * Reads the cells of one row and keeps what is wrong with each.
 *
 * For every kind of cell the answer is `undefined` when the file has no such column, and `null` when the
 * cell is empty or wrong; a wrong one leaves a remark.
 */
export class CellReader {
  readonly remarks: CellRemark[] = [];

  constructor(
    private readonly cells: Cells,
    /** The day it is, in the organisation's zone. */
    private readonly today: string,
  ) {}

  /** Says that a cell is wrong. */
  refuse(column: string, reason: string): null {
    this.remarks.push({ column, value: this.cells[column] ?? '', reason });
    return null;
  }

  has(column: string): boolean {
    return this.cells[column] !== undefined;
  }

  /** Like `read`, for a cell that may not be empty. */
  required<Value>(column: string, read: (column: string) => Value | null | undefined): Value | null {
    if (!this.cells[column]?.trim()) return this.refuse(column, 'This cell is empty and may not be.');
    return read(column) ?? null;
  }

  text(column: string, maxLength = nameMaxLength): string | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    if (text.length > maxLength) {
      return this.refuse(column, `This has ${text.length} characters; at most ${maxLength} are taken.`);
    }
    return text;
  }

  date(column: string): string | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    if (!/^\d{4}-\d{2}-\d{2}$/.test(text)) {
      return this.refuse(column, 'This is not a date. Write year, month and day as 2026-03-14.');
    }
    const day = new Date(`${text}T00:00:00Z`);
    if (Number.isNaN(day.getTime()) || day.toISOString().slice(0, 10) !== text) {
      return this.refuse(column, 'There is no such day.');
    }
    if (text < earliest) return this.refuse(column, 'This lies before 1900.');
    if (text > this.today) return this.refuse(column, `This lies in the future: today is ${this.today}.`);
    return text;
  }

  timeOfDay(column: string): string | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    if (/^([01]\d|2[0-3]):[0-5]\d$/.test(text)) return text;
    return this.refuse(column, 'This is not a time of day. Write hours and minutes as 09:05.');
  }

  wholeNumber(column: string, most: number): number | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    const value = Number(text);
    if (/^\d+$/.test(text) && value >= 1 && value <= most) return value;
    return this.refuse(column, `This is not a whole number from 1 to ${most}.`);
  }

  hoursADay(column: string): number | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    if (/^\d+,\d+$/.test(text)) {
      return this.refuse(column, `Write decimals with a point: ${text.replace(',', '.')}.`);
    }
    if (!/^-?\d+(\.\d+)?$/.test(text)) return this.refuse(column, 'This is not a number. Write it as 7.5.');
    const value = Math.round(Number(text) * 10_000) / 10_000;
    if (value > 0 && value <= 24) return value;
    return this.refuse(column, 'Hours a day are above 0 and at most 24.');
  }

  oneOf<Choice extends string>(column: string, choices: readonly Choice[]): Choice | null | undefined {
    const text = this.cells[column]?.trim();
    if (!text) return text === undefined ? undefined : null;
    const chosen = choices.find((choice) => choice === text.toLowerCase().replace(/[\s_-]+/g, ' '));
    return chosen ?? this.refuse(column, `This is not one of: ${choices.join(', ')}.`);
  }
}
