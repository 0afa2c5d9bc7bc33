/** What a class's assets can be ordered by. */
export const positionSorts = ['failures', 'tag', 'site', 'renewals', 'last'] as const;
export type PositionSort = (typeof positionSorts)[number];
