import { z } from 'zod';
import { CellReader, type Cells } from './import-cells';
import type { CellRemark } from './import-types';

export const assetTagMaxLength = 60;
export const quantityMax = 100_000;

export const importClocks = { days: 'calendar-days', hours: 'operating-hours' } as const;

const optionalDay = z.string().nullable().optional();

/**
 * A register row as it was read. Days are 'YYYY-MM-DD'. What the file has no column for is left out, and
 * stays as it is in an asset already held; null is an empty cell, and clears.
 */
export const registerRowSchema = z.object({
  site: z.string(),
  area: z.string().nullable().optional(),
  className: z.string(),
  /** The clock a new class is made with; null where the file does not say. */
  clock: z.enum(['days', 'hours']).nullable(),
  item: z.string().nullable(),
  items: z.string().nullable(),
  tag: z.string(),
  quantity: z.number().nullable().optional(),
  inServiceOn: z.string(),
  watchedFrom: optionalDay,
  watchedUntil: optionalDay,
  retiredOn: optionalDay,
  hoursADay: z.number().nullable().optional(),
  itemFittedOn: optionalDay,
});
export type RegisterRow = z.output<typeof registerRowSchema>;

/** A register row as far as its cells could be read: what is required and wrong is null. */
export type ReadRegisterRow = {
  [Key in keyof RegisterRow]: RegisterRow[Key] | null;
};

/** Reads the cells of one register row, each by itself; what needs the records is for later. */
export function readRegisterRow(
  cells: Cells,
  today: string,
): { row: ReadRegisterRow; remarks: CellRemark[] } {
  const reader = new CellReader(cells, today);
  const name = (column: string) => reader.text(column);
  const day = (column: string) => reader.date(column);
  const row: ReadRegisterRow = {
    site: reader.required('site', name),
    area: reader.text('area'),
    className: reader.required('class', name),
    clock: reader.oneOf('clock', ['days', 'hours']) ?? null,
    item: reader.text('item') ?? null,
    items: reader.text('items') ?? null,
    tag: reader.required('tag', (column) => reader.text(column, assetTagMaxLength)),
    quantity: reader.wholeNumber('quantity', quantityMax),
    inServiceOn: reader.required('in service', day),
    watchedFrom: day('watched from'),
    watchedUntil: day('watched until'),
    retiredOn: day('retired'),
    hoursADay: reader.hoursADay('hours a day'),
    itemFittedOn: day('item fitted'),
  };
  return { row, remarks: reader.remarks };
}

/** The dates of an asset, as they would stand. */
export interface AssetDates {
  readonly inServiceOn: string;
  readonly watchedFrom: string;
  readonly watchedUntil: string | null;
  readonly retiredOn: string | null;
  readonly itemFittedOn: string | null;
}

/** What is wrong with an asset's dates taken together. */
export function refuseAssetDates(dates: AssetDates): CellRemark[] {
  const { inServiceOn, watchedFrom, watchedUntil, retiredOn, itemFittedOn } = dates;
  const remarks: CellRemark[] = [];
  const refuse = (column: string, value: string, reason: string) => remarks.push({ column, value, reason });
  if (watchedFrom < inServiceOn) {
    refuse(
      'watched from',
      watchedFrom,
      `The watch starts before the asset went into service on ${inServiceOn}.`,
    );
  }
  if (watchedUntil !== null && watchedUntil <= watchedFrom) {
    refuse('watched until', watchedUntil, `The watch ends before, or on the day, it starts: ${watchedFrom}.`);
  }
  if (retiredOn !== null && retiredOn <= inServiceOn) {
    refuse('retired', retiredOn, `Retired before, or on the day, it went into service: ${inServiceOn}.`);
  }
  if (itemFittedOn !== null && (itemFittedOn < inServiceOn || itemFittedOn > watchedFrom)) {
    refuse(
      'item fitted',
      itemFittedOn,
      `The item in place when the watch starts was fitted from ${inServiceOn} to ${watchedFrom}, or that is not known.`,
    );
  }
  return remarks;
}
