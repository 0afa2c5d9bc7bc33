import { createHash } from 'node:crypto';
import { DateTime } from 'luxon';
import { z } from 'zod';
import { effects, outsideCauses } from './failure';
import { CellReader, nameMaxLength, type Cells } from './import-cells';
import type { CellRemark } from './import-types';

export const noteMaxLength = 4000;
export const plannedKinds = ['replace', 'restore', 'inspect', 'service', 'test'] as const;

/**
 * A history row as it was read. What the file has no column for is left out, and stays as it is in a record
 * already held; null is an empty cell, and clears.
 */
export const historyRowSchema = z.object({
  tag: z.string(),
  /** 'YYYY-MM-DD' in the organisation's zone. */
  on: z.string(),
  /** 'HH:MM' in the organisation's zone. */
  time: z.string().nullable().optional(),
  event: z.enum(['failure', 'planned work']),
  result: z.enum(['renewed', 'patched', 'not renewed']),
  mode: z.string().nullable().optional(),
  outsideCause: z.enum(outsideCauses).nullable().optional(),
  kind: z.enum(plannedKinds).nullable().optional(),
  itemFittedOn: z.string().nullable().optional(),
  note: z.string().nullable().optional(),
  record: z.string().nullable(),
  /** What the record is found again by. */
  sourceKey: z.string(),
});
export type HistoryRow = z.output<typeof historyRowSchema>;

/** A history row as far as its cells could be read: what is required and wrong is null. */
export type ReadHistoryRow = {
  [Key in keyof Omit<HistoryRow, 'sourceKey'>]: HistoryRow[Key] | null;
} & {
  /** Which of several otherwise equal rows it says it is. */
  occurrence: number | null;
};

export interface HistoryContext {
  readonly today: string;
  readonly timeZone: string;
}

/** Reads the cells of one history row and holds them against each other; what needs the records is for later. */
export function readHistoryRow(
  cells: Cells,
  context: HistoryContext,
): { row: ReadHistoryRow; remarks: CellRemark[] } {
  const reader = new CellReader(cells, context.today);
  const row: ReadHistoryRow = {
    tag: reader.required('tag', (column) => reader.text(column)),
    on: reader.required('date', (column) => reader.date(column)),
    time: reader.timeOfDay('time'),
    event: reader.required('event', (column) => reader.oneOf(column, ['failure', 'planned work'])),
    result: reader.required('result', (column) => reader.oneOf(column, [...effects, 'not renewed'])),
    mode: reader.text('failure mode'),
    outsideCause: reader.oneOf('outside cause', outsideCauses),
    kind: reader.oneOf('kind', plannedKinds),
    itemFittedOn: reader.date('item fitted'),
    note: reader.text('note', noteMaxLength),
    record: reader.text('record', nameMaxLength) ?? null,
    occurrence: reader.wholeNumber('occurrence', 100_000) ?? null,
  };
  refuseContradictions(row, reader);
  if (row.on && row.time && !momentOf(row.on, row.time, context.timeZone)) {
    reader.refuse(
      'time',
      `There was no such time on that day in ${context.timeZone}: the clocks went forward.`,
    );
  }
  return { row, remarks: reader.remarks };
}

function refuseContradictions(row: ReadHistoryRow, reader: CellReader): void {
  const { on, event, result, mode, outsideCause, kind, itemFittedOn } = row;
  if (event === 'failure') {
    if (result === 'not renewed') {
      reader.refuse('result', 'A failure was either renewed or patched.');
    }
    if (kind) reader.refuse('kind', 'Only planned work has a kind.');
  }
  if (event === 'planned work') {
    if (result === 'patched') reader.refuse('result', 'Planned work ends in renewed or not renewed.');
    if (mode) reader.refuse('failure mode', 'Only a failure has a failure mode.');
    if (outsideCause) reader.refuse('outside cause', 'Only a failure has an outside cause.');
    if (result === 'renewed' && kind && kind !== 'replace' && kind !== 'restore') {
      reader.refuse('kind', 'Only replace and restore renew the item.');
    }
  }
  if (on && itemFittedOn && itemFittedOn > on) {
    reader.refuse('item fitted', `The item was fitted after the event on ${on}.`);
  }
}

/** The instant of a day and a time of day in a zone; null for one the clocks skipped. */
export function momentOf(on: string, time: string, timeZone: string): Date | null {
  const moment = DateTime.fromISO(`${on}T${time}`, { zone: timeZone });
  return moment.isValid && moment.toFormat('HH:mm') === time ? moment.toJSDate() : null;
}

/** The kind of planned work a row says, or the one its result stands for. */
export function plannedKindOf(row: HistoryRow): (typeof plannedKinds)[number] {
  return row.kind ?? (row.result === 'renewed' ? 'replace' : 'inspect');
}

/**
 * What makes rows without a record number the same record but for their occurrence: tag, day, time, event,
 * mode and kind, as they stand in the file. `subject` is the asset's id, or the tag where it is unknown.
 */
export function combinationOf(subject: string, cells: Cells): string {
  const parts = ['date', 'time', 'event', 'failure mode', 'kind'].map((column) => plain(cells[column]));
  return sha256([plain(subject), ...parts].join('\u001f'));
}

function plain(cell = ''): string {
  return cell.trim().toLowerCase().replace(/\s+/g, ' ');
}

/** The key a record from a file is found again by. */
export function sourceKeyOf(record: string | null, combination: string, occurrence: number): string {
  return record === null ? `row:${combination}:${occurrence}` : `record:${record}`;
}

/** The id of the record with that key: always the same one, laid out as a UUID of version 8 (RFC 9562). */
export function recordIdOf(event: HistoryRow['event'], sourceKey: string): string {
  const hex = sha256(`${event}\u001f${sourceKey}`);
  return [
    hex.slice(0, 8),
    hex.slice(8, 12),
    `8${hex.slice(13, 16)}`,
    `8${hex.slice(17, 20)}`,
    hex.slice(20, 32),
  ].join('-');
}

function sha256(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}
