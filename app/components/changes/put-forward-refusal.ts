import { formatCalendarDate } from '~/format/date';
import type { PutForwardResult } from '~/models/schedule-changes-put-forward.server';

type Refusal =
  | Exclude<PutForwardResult, { outcome: 'stored' | 'already-stored' | 'another-open' }>
  | { outcome: 'another-open' };

/** Why a change cannot be put forward as things stand, and what can be done. */
export function putForwardRefusal(refusal: Refusal): string {
  switch (refusal.outcome) {
    case 'another-open':
      return 'Somebody has put another change of this class forward meanwhile. It has to be decided or withdrawn first; what you typed is still here.';
    case 'not-assessed':
      return 'The class is not assessed yet: there is no evidence to put forward.';
    case 'marked':
      return 'The class is statutory or its failure endangers people: changes of it are not put forward here.';
    case 'schedule-changed':
      return 'The planned maintenance of this class was changed meanwhile. Load the page again and look at what is in force now.';
    case 'not-priced':
      return 'The schedule was changed since the last night looked at the class. Put the change forward after the next night, which will have priced what is in force now.';
    case 'ends-already':
      return `The schedule in force ends on ${formatCalendarDate(refusal.endsOn)} already. Put the next change forward once the night has looked at what comes after it.`;
  }
}
