/** What a class's records can be ordered by. */
export const classRecordSorts = ['day', 'tag', 'logged'] as const;
export type ClassRecordSort = (typeof classRecordSorts)[number];
