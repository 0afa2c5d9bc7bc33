import { formatNoun } from '~/format/number';
import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

/** Below this many failures a fitted shape leans to the high side and its interval is rough. */
const enoughFailures = 10;

/** Fewer than 10 failures behind a verdict. */
export function fewFailures({ findings }: ClassFacts): Caution | null {
  const { failures } = findings.life.fit;
  if (failures >= enoughFailures) return null;
  return {
    code: 'few-failures',
    severity: 'caution',
    sentence:
      failures === 0
        ? 'No failure of known age is behind this.'
        : `Only ${formatNoun(failures, 'failure')} of known age ${failures === 1 ? 'is' : 'are'} behind this. With so few, the fitted shape tends to come out too high.`,
    action: 'Keep logging; change no schedule on this alone.',
  };
}
