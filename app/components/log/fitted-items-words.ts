import type { FittedRefusal } from '~/models/fitted-rows';
import { formatCalendarDate } from '~/format/date';
import { formatNoun } from '~/format/number';

/** Why a list of fitted items cannot be kept, in a sentence that says what to do. */
export function fittedRefusalSentence(
  refusal: FittedRefusal,
  asset: {
    tag: string;
    quantity: number;
    inServiceOn: string;
    watchedFrom: string;
    itemSingular: string;
    itemPlural: string;
  },
): string {
  const fitted = 'fittedOn' in refusal ? formatCalendarDate(refusal.fittedOn) : '';
  switch (refusal.code) {
    case 'unreadable':
      return `“${refusal.line}” does not say how many were fitted when. Write one day a line, as 2024-03-01 x 48.`;
    case 'no-such-day':
      return `There is no such day as in “${refusal.line}”. Write year, month and day, as 2024-03-01 x 48.`;
    case 'twice':
      return `${fitted} is there twice. Add its items up in one line.`;
    case 'before-service':
      return `${asset.tag} went into service on ${formatCalendarDate(asset.inServiceOn)}, so nothing was fitted in it on ${fitted}.`;
    case 'after-opening':
      return `The list is of what was in place on ${formatCalendarDate(asset.watchedFrom)}, so nothing in it was fitted on ${fitted}. What was fitted later is in the records.`;
    case 'too-many':
      return `That makes ${formatNoun(refusal.sum, asset.itemSingular, asset.itemPlural)}, and ${asset.tag} holds ${asset.quantity}.`;
  }
}
