/** What the list of classes can be ordered by; `attention` puts first what asks for a decision. */
export const classSortKeys = [
  'attention',
  'name',
  'verdict',
  'trend',
  'failures',
  'recent',
  'mtbf',
  'slope',
] as const;
export type ClassSortKey = (typeof classSortKeys)[number];
