import type { Cells } from './import-cells';
import type { CellRemark, RowStatus } from './import-types';

/** A row of a file, as it stands there. */
export interface FileRow {
  readonly line: number;
  /** By the name of the column in the format. */
  readonly cells: Cells;
  /** What is wrong with the row as a whole, found when it was taken apart. */
  readonly remarks: readonly CellRemark[];
}

/** A row that could be read, on its way to the records. */
export interface ReadRow<Row> {
  readonly line: number;
  readonly row: Row;
  readonly remarks: readonly CellRemark[];
}

/** A row held against the records: what applying it would do. */
export interface JudgedRow<Row, Target> {
  readonly line: number;
  readonly status: RowStatus;
  /** Why it is rejected, or what it changes. */
  readonly remarks: readonly CellRemark[];
  /** Null for a rejected row. */
  readonly row: Row | null;
  /** What to write; null when there is nothing to write. */
  readonly target: Target | null;
}

/** One value as it is and as it would be, as people read it. */
export type Comparison = readonly [
  column: string,
  before: string | number | null,
  after: string | number | null,
];

/** What a row changes in a record already held, as remarks. */
export function changesOf(comparisons: readonly Comparison[]): CellRemark[] {
  return comparisons
    .filter(([, before, after]) => before !== after)
    .map(([column, before, after]) => ({
      column,
      value: after === null ? '' : String(after),
      reason: before === null ? 'was empty' : `was ${before}`,
    }));
}

/** Names are the same name whatever their capitals. */
export function sameName(a: string | null, b: string | null): boolean {
  return a === b || (a !== null && b !== null && a.toLowerCase() === b.toLowerCase());
}
