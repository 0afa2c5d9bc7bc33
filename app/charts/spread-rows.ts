const MOST_ROWS = 40;

/** At most so many rows of a long table, evenly spread, always the last one. */
export function spreadRows<Row>(rows: readonly Row[], most = MOST_ROWS): readonly Row[] {
  if (rows.length <= most) return rows;
  const stride = Math.ceil(rows.length / (most - 1));
  return rows.filter((_, index) => index === rows.length - 1 || index % stride === 0);
}
