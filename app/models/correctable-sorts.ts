/** What the table of failures to correct can be ordered by. */
export const correctableSorts = ['day', 'tag', 'mode', 'fitted', 'logged'] as const;
export type CorrectableSort = (typeof correctableSorts)[number];
