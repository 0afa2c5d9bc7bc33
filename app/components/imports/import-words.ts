import type { ImportKind, RowStatus } from '~/models/import-types';
import type { ImportState } from '~/models/imports.server';
import { formatFixed, formatNoun, formatTrimmed } from '~/format/number';

export const kindWords: Record<ImportKind, string> = { register: 'Register', history: 'History' };

export const stateWords: Record<ImportState, string> = {
  reading: 'Being read',
  previewed: 'Waits for a decision',
  applied: 'Applied',
  discarded: 'Discarded',
  failed: 'Could not be read',
};

export const statusWords: Record<RowStatus, string> = {
  new: 'New',
  changed: 'Changed',
  unchanged: 'Unchanged',
  rejected: 'Rejected',
};

/** A file's size as people read it: "312 bytes", "4.1 MiB". */
export function formatBytes(bytes: number): string {
  if (bytes < 1024) return formatNoun(bytes, 'byte');
  if (bytes < 1024 * 1024) return `${formatFixed(bytes / 1024, 0)} KiB`;
  return `${formatTrimmed(bytes / 1024 / 1024)} MiB`;
}
