/** Replace and restore put an as-good-as-new item in place; the others do not. */
export const taskKinds = ['replace', 'restore', 'inspect', 'service', 'test'] as const;
export type TaskKind = (typeof taskKinds)[number];
