export const importKinds = ['register', 'history'] as const;
/** `register`: the assets themselves; `history`: their failures and planned work. */
export type ImportKind = (typeof importKinds)[number];

export const rowStatuses = ['new', 'changed', 'unchanged', 'rejected'] as const;
/** What applying the import does, or would do, with a row. */
export type RowStatus = (typeof rowStatuses)[number];

/** One cell and what is to be said of it: why its row is rejected, or what it changes. */
export interface CellRemark {
  /** Heading as the format names it; empty when the whole row is meant. */
  readonly column: string;
  readonly value: string;
  readonly reason: string;
}

/** A file that cannot be read at all; the message is a sentence for the person who chose it. */
export class ImportFileError extends Error {
  override name = 'ImportFileError';
}
