import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

/** Set on the class: its failure can hurt somebody. */
export function endangersPeople({ marks }: ClassFacts): Caution | null {
  if (!marks.endangersPeople) return null;
  return {
    code: 'endangers-people',
    severity: 'stop',
    sentence: `A failure of ${marks.itemPlural} can hurt people. What is shown here is evidence only; cost is not what decides.`,
    action:
      'Leave intervals and methods to the licensed practitioner and the local code. Make a failed item safe first, then log it.',
  };
}
