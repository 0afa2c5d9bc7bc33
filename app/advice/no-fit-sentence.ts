import { formatNoun } from '~/format/number';
import type { NoFitReason } from '~/reliability/power-law';

/**
 * Why a shape cannot be estimated, in words.
 *
 * @param which what kind of failures were counted: "of known age", "on record".
 */
export function noFitSentence(reason: NoFitReason, which: string): string {
  switch (reason.code) {
    case 'no-failures':
      return `No failure ${which}.`;
    case 'failures-only-at-the-end':
      return reason.failures === 1
        ? `The one failure ${which} came at the longest age reached, which fits any steepness.`
        : `All ${formatNoun(reason.failures, 'failure')} ${which} came at the longest age reached, which fits any steepness.`;
    case 'slope-above-search':
      return `The ${formatNoun(reason.failures, 'failure')} ${which} came at almost the same age, steeper than can be estimated.`;
    case 'slope-below-search':
      return `The ${formatNoun(reason.failures, 'failure')} ${which} came so early that no shape can be estimated.`;
  }
}
