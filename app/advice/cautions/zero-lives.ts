import { formatNoun } from '~/format/number';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/** A failure on the very day of a renewal: a repair that did not hold, two items at once, or one failure logged twice. */
export function zeroLives({ findings, marks }: CautionFacts): Caution | null {
  const { zeroLives } = findings.extent;
  if (zeroLives === 0) return null;
  return {
    code: 'zero-lives',
    severity: 'note',
    sentence: `${formatNoun(zeroLives, 'failure')} came on the very day the ${marks.itemSingular} was fitted. ${zeroLives === 1 ? 'It counts' : 'They count'} at half a day of age, and make ${marks.itemPlural} look as if the young ones failed first.`,
    action:
      'Check whether a repair did not hold, two failed at once, or one failure was logged twice; void the second entry then.',
  };
}
