import { formatNoun } from '~/format/number';
import type { ModeVerdict } from '../judge-modes';
import type { Verdict } from '../verdict';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/**
 * Two failure modes differ in verdict, so that one verdict on all of them is an average of unlike things. A
 * mode that is undecided differs from a decided one only where the intervals of their shapes do not meet:
 * to know nothing of a mode is no difference.
 */
export function mixedModes({ modeVerdicts }: CautionFacts): Caution | null {
  if (!modesDiffer(modeVerdicts)) return null;
  const each = modeVerdicts.map(
    ({ name, failures, verdict }) => `${name} ${verdictPhrase[verdict]} (${formatNoun(failures, 'failure')})`,
  );
  return {
    code: 'mixed-modes',
    severity: 'caution',
    sentence: `The verdict on all failures together mixes modes that are unlike: ${each.join('; ')}.`,
    action:
      'Go by the modes, each on its own: a schedule can help against one and do nothing against another.',
  };
}

const verdictPhrase: Record<Verdict, string> = {
  'wear-out': 'wears out',
  memoryless: 'is memoryless',
  'early-life': 'strikes early in life',
  undecided: 'is undecided',
};

/** Whether two of the modes differ in verdict. */
export function modesDiffer(modeVerdicts: readonly ModeVerdict[]): boolean {
  return modeVerdicts.some((one) => modeVerdicts.some((other) => differ(one, other)));
}

function differ(one: ModeVerdict, other: ModeVerdict): boolean {
  if (one.verdict === other.verdict) return false;
  if (one.verdict !== 'undecided' && other.verdict !== 'undecided') return true;
  const [a, b] = [one.shapeInterval, other.shapeInterval];
  return a !== null && b !== null && (a.low > b.high || b.low > a.high);
}
