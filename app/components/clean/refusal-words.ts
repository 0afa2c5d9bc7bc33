import { refusalSentence } from '~/components/log/refusal-words';
import { formatCalendarDate } from '~/format/date';
import type { FailureRefusal } from '~/models/failure-refusals';

/** Why a failure cannot be corrected so: as when one is logged, but for what only that form lets people choose. */
export function refusalWords(
  refusal: FailureRefusal,
  record: { tag: string; itemSingular: string; after: { failedOn: string } },
): string {
  if (refusal.code === 'fitted-after-failed') {
    return `Fitted on ${formatCalendarDate(refusal.day)}, the ${record.itemSingular} cannot have failed on ${formatCalendarDate(record.after.failedOn)}.`;
  }
  return refusalSentence(refusal, record);
}
