import { formatDateTime } from '~/format/date';

const deeds: Record<string, string> = {
  log: 'logged it',
  void: 'undid it',
  restore: 'put it back',
  'change-settings': 'changed these settings',
};

/** Tells the second of two people what the first one did. */
export function changedMeanwhile(
  lastChange: { action: string; personName: string | null; at: Date } | null,
  timeZone: string,
): string {
  if (lastChange === null) return 'This was changed meanwhile. Look at it again below.';
  const { personName, action, at } = lastChange;
  const deed = deeds[action] ?? 'changed it';
  return `${personName ?? 'Somebody'} ${deed} meanwhile (${formatDateTime(at, timeZone)}). Look at it again below.`;
}
