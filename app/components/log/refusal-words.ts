import type { FailureRefusal } from '~/models/failure-refusals';
import { withArticle } from '~/format/article';
import { formatCalendarDate } from '~/format/date';

/** Field of the log form that a refusal belongs to; null for the whole form. */
export type RefusedField = 'mode' | 'when' | 'failedOn' | 'fitted' | 'fittedOn' | null;

const capitalised = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

/** Why a failure of an asset cannot be stored, in a sentence that says what to do. */
export function refusalSentence(
  refusal: FailureRefusal,
  asset: { tag: string; itemSingular: string },
): string {
  const day = 'day' in refusal ? formatCalendarDate(refusal.day) : '';
  switch (refusal.code) {
    case 'unknown-asset':
      return 'This asset is not in the register any more.';
    case 'id-taken':
      return 'This form was used for another entry already. Open it again from the asset.';
    case 'mode-of-another-class':
      return 'This is not on the list of what can fail here any more. Choose again.';
    case 'in-future':
      return 'This lies in the future. Give the day and time it failed.';
    case 'before-service':
      return `${asset.tag} went into service on ${day}, so it cannot have failed before. Check the day.`;
    case 'after-retirement':
      return `${asset.tag} was retired on ${day}. Give a day up to then, or ask for the register to be put right.`;
    case 'after-watch':
      return `Failures of ${asset.tag} are recorded up to ${day} only. Give a day up to then, or ask for the register to be put right.`;
    case 'fitted-after-failed':
      return `${capitalised(withArticle(asset.itemSingular))} fitted on ${day} cannot have failed before that day. Check the day it failed, or say “No, or not sure”.`;
    case 'fitted-before-service':
      return `${asset.tag} went into service on ${day}, so nothing was fitted in it before. Check the day, or leave it empty.`;
  }
}

/** @param form what the person chose, which decides the field that shows the sentence. */
export function refusedField(
  refusal: FailureRefusal,
  form: { when: 'now' | 'earlier'; fitted: 'yes' | 'no' },
): RefusedField {
  switch (refusal.code) {
    case 'mode-of-another-class':
      return 'mode';
    case 'in-future':
    case 'before-service':
    case 'after-retirement':
    case 'after-watch':
      return form.when === 'earlier' ? 'failedOn' : 'when';
    case 'fitted-after-failed':
    case 'fitted-before-service':
      return form.fitted === 'no' ? 'fittedOn' : 'fitted';
    default:
      return null;
  }
}
