// What makes a spreadsheet take a cell for a formula when it opens a CSV file (OWASP, "CSV Injection").
const starts = '=+\\-@\\t\\r\\n\\uFF1D\\uFF0B\\uFF0D\\uFF20';
const dangerous = new RegExp(`^'*[${starts}]`);
const guarded = new RegExp(`^'+[${starts}]`);

/**
 * A cell as it may be handed to a spreadsheet: one that would be taken for a formula gets an apostrophe in
 * front. A cell that has such an apostrophe already gets another, so that {@link unguardFormula} gives back
 * every cell as it was.
 */
export function guardFormula(cell: string): string {
  return dangerous.test(cell) ? `'${cell}` : cell;
}

/** The cell that {@link guardFormula} was given. */
export function unguardFormula(cell: string): string {
  return guarded.test(cell) ? cell.slice(1) : cell;
}
