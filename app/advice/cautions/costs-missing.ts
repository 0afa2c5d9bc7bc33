import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/** No cost given: no interval can be advised, only a verdict. */
export function costsMissing({ pricing: { missing }, marks }: CautionFacts): Caution | null {
  if (missing.length === 0) return null;
  const what =
    missing.length > 1
      ? 'Neither the cost of a planned renewal nor that of a failure is given'
      : `The cost of a ${missing[0] === 'planned' ? 'planned renewal' : 'failure'} is not given`;
  return {
    code: 'costs-missing',
    severity: 'note',
    sentence: `${what}: whether a schedule pays for ${marks.itemPlural} cannot be worked out, only whether they wear out.`,
    action:
      'Give both costs in the class settings: a failure with labour, parts and what it does to the building.',
  };
}
