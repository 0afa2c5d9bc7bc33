/** So many items of an asset that had been fitted on a day, 'YYYY-MM-DD'. */
export interface FittedRow {
  readonly fittedOn: string;
  readonly count: number;
}

/** Why the list of fitted items of an asset cannot be kept. */
export type FittedRefusal =
  | { readonly code: 'unreadable'; readonly line: string }
  | { readonly code: 'no-such-day'; readonly line: string }
  | { readonly code: 'twice'; readonly fittedOn: string }
  | { readonly code: 'before-service'; readonly fittedOn: string }
  | { readonly code: 'after-opening'; readonly fittedOn: string }
  | { readonly code: 'too-many'; readonly sum: number };

export const mostFittedRows = 500;

/**
 * Reads a list such as "2024-03-01 x 48", one day a line or with semicolons between, in order of time.
 * Nothing at all is the empty list.
 */
export function parseFittedRows(
  text: string,
): { readonly rows: FittedRow[] } | { readonly refusal: FittedRefusal } {
  const lines = text
    .split(/[\n;]/)
    .map((line) => line.trim())
    .filter((line) => line !== '');
  const rows: FittedRow[] = [];
  for (const line of lines) {
    const match = /^(\d{4}-\d{2}-\d{2})\s*[x×*]\s*(\d{1,6})$/i.exec(line);
    const [, fittedOn = '', digits = ''] = match ?? [];
    const count = Number(digits);
    if (!match || count === 0) return { refusal: { code: 'unreadable', line } };
    if (!isDay(fittedOn)) return { refusal: { code: 'no-such-day', line } };
    if (rows.some((row) => row.fittedOn === fittedOn)) return { refusal: { code: 'twice', fittedOn } };
    rows.push({ fittedOn, count });
  }
  return { rows: rows.sort((a, b) => (a.fittedOn < b.fittedOn ? -1 : 1)) };
}

/** The list as its field holds it, so that {@link parseFittedRows} reads back the same. */
export function fittedRowsText(rows: readonly FittedRow[]): string {
  return rows.map(({ fittedOn, count }) => `${fittedOn} x ${count}`).join('\n');
}

/**
 * The first thing about the asset that makes the list impossible, or null. The list speaks of the items in
 * place when the watch opened: none of them was fitted before the asset was in service, or after the opening.
 */
export function refuseFittedRows(
  asset: { readonly quantity: number; readonly inServiceOn: string; readonly watchedFrom: string },
  rows: readonly FittedRow[],
): FittedRefusal | null {
  for (const { fittedOn } of rows) {
    if (fittedOn < asset.inServiceOn) return { code: 'before-service', fittedOn };
    if (fittedOn > asset.watchedFrom) return { code: 'after-opening', fittedOn };
  }
  const sum = rows.reduce((total, { count }) => total + count, 0);
  return sum > asset.quantity ? { code: 'too-many', sum } : null;
}

function isDay(text: string): boolean {
  const instant = new Date(`${text}T00:00:00Z`);
  return !Number.isNaN(instant.getTime()) && instant.toISOString().startsWith(text);
}
