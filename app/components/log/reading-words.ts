import type { ReadingRefusal } from '~/models/reading-refusals';
import { formatCalendarDate } from '~/format/date';
import { hoursWords } from './hours-words';

/** Why a reading of an asset's meter cannot be stored, put back or undone, in a sentence that says what to do. */
export function readingRefusalSentence(refusal: ReadingRefusal, asset: { tag: string }): string {
  const day = 'day' in refusal ? formatCalendarDate(refusal.day) : '';
  const other =
    'other' in refusal
      ? `${hoursWords(refusal.other.hours)} on ${formatCalendarDate(refusal.other.readOn)}`
      : '';
  switch (refusal.code) {
    case 'unknown-asset':
      return 'This asset is not in the register any more.';
    case 'id-taken':
      return 'This form was used for another reading already. Open it again from the asset.';
    case 'in-future':
      return 'This day lies in the future. Give the day the meter was read.';
    case 'before-service':
      return `${asset.tag} went into service on ${day}, so its meter was not read before. Check the day.`;
    case 'after-retirement':
      return `${asset.tag} was retired on ${day}. Give a day up to then, or ask for the register to be put right.`;
    case 'same-day':
      return `There is a reading of that day already: ${other}. Undo it first if it is wrong.`;
    case 'below-earlier':
      return `A meter only counts up, and this one showed ${other}. Check the figure, or tick that the meter was changed.`;
    case 'above-later':
      return `A meter only counts up, and later it showed ${other}. Check the figure and the day.`;
    case 'too-fast':
      return `The meter showed ${other}: more hours lie between than the days have. Check the figure and the day.`;
    case 'needed':
      return `It tells of a new meter, and without it ${other} would go back. Undo that reading first.`;
  }
}

/** Field of the form that a refusal belongs to; null for the whole form. */
export function refusedReadingField({ code }: ReadingRefusal): 'readOn' | 'hours' | null {
  switch (code) {
    case 'in-future':
    case 'before-service':
    case 'after-retirement':
    case 'same-day':
      return 'readOn';
    case 'below-earlier':
    case 'above-later':
    case 'too-fast':
      return 'hours';
    default:
      return null;
  }
}
