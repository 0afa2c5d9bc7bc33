import { formatCount, formatFixed, formatNoun, formatP } from '~/format/number';
import type { ScatterFindings } from '../scatter-findings';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

const unlikely = 0.05;

/**
 * Counts per position more uneven than one rate allows. Mixing positions of different rates makes the hazard
 * look falling: the bad ones fail young, and what is left to grow old are the good ones (Proschan 1963).
 */
export function fewBadPositions({ findings, marks }: CautionFacts): Caution | null {
  const uneven = findings.scatter.perPosition;
  if (uneven === null || !isUneven(uneven)) return null;
  const { positions, failures, standingOut, worst, p } = uneven;
  const named = worst.map(
    (position) =>
      `${position.tag} (${formatCount(position.failures)} where ${formatFixed(position.expected, 1)} would be its share)`,
  );
  const more = standingOut > worst.length ? ` and ${formatCount(standingOut - worst.length)} more` : '';
  const who = named.length === 0 ? 'No single one stands out.' : `Standing out: ${named.join(', ')}${more}.`;
  return {
    code: 'few-bad-positions',
    severity: 'caution',
    sentence: `${formatNoun(failures, 'failure')} at ${formatNoun(positions, 'position')} are spread more unevenly than chance allows (${formatP(p)}). ${who} Mixing bad and good positions makes ${marks.itemPlural} look as if the young ones failed first.`,
    action:
      named.length === 0
        ? 'Compare positions with many and with few failures: use, surroundings, make.'
        : 'Look at those positions first: what they sit in, how they are used, whether a repair there ever held.',
  };
}

/** The tags of positions with far more failures than their share, the worst first; empty where counts are even. */
export function badPositions({ perPosition }: ScatterFindings): string[] {
  return perPosition !== null && isUneven(perPosition) ? perPosition.worst.map(({ tag }) => tag) : [];
}

function isUneven({ p }: { p: number }): boolean {
  return p < unlikely;
}
