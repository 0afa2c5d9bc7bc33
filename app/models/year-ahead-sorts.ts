/** What the failures to come can be ordered by. */
export const yearAheadSorts = ['class', 'site', 'positions', 'expected', 'spares', 'cost'] as const;
export type YearAheadSort = (typeof yearAheadSorts)[number];

/** Months ahead that can be looked at. */
export const monthsAhead = ['1', '3', '12'] as const;
export type MonthsAhead = (typeof monthsAhead)[number];
