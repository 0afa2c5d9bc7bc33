import { formatCalendarDate } from '~/format/date';

export interface FittedQuestion {
  /** The day a yes confirms, 'YYYY-MM-DD'. */
  readonly on: string;
  readonly label: string;
  readonly hint: string;
  /** Whether yes is the answer unless the person says otherwise. */
  readonly presumed: boolean;
}

/**
 * The question about the age of the failed item. Yes is presumed only where a record says so and there is
 * just one item it can be about.
 */
export function fittedQuestion(
  asset: { tag: string; quantity: number; itemSingular: string; itemPlural: string },
  lastFitted: { on: string; standing: 'recorded' | 'assumed' },
): FittedQuestion {
  const { on, standing } = lastFitted;
  const day = formatCalendarDate(on);
  if (asset.quantity > 1) {
    return {
      on,
      label: `Was it one of the first, fitted on ${day}?`,
      hint: `There are ${asset.quantity} ${asset.itemPlural} here. The age of the failed one tells whether ${asset.itemPlural} wear out.`,
      presumed: false,
    };
  }
  if (standing === 'assumed') {
    return {
      on,
      label: `Had it been there since ${day}?`,
      hint: `That is when ${asset.tag} went into service; no record says when the ${asset.itemSingular} was fitted.`,
      presumed: false,
    };
  }
  return {
    on,
    label: `Was the old one fitted on ${day}?`,
    hint: `That is what the last record says. Its age tells whether ${asset.itemPlural} wear out.`,
    presumed: true,
  };
}
