import { formatCount, formatFixed, formatNoun, formatP } from '~/format/number';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

const unlikely = 0.05;

/** The Cramér–von Mises check of the trend's power law, or the check of the Weibull life, rejects at 5 %. */
export function poorFit({ findings }: CautionFacts): Caution | null {
  const { trend, life } = findings.scatter.fit;
  const parts: string[] = [];
  if (life !== null && life.p < unlikely) {
    parts.push(
      `The fitted life does not follow the ages at failure: in ${formatCount(life.bands)} age bands of ${formatNoun(life.failures, 'failure')} the hazard goes another way (${formatP(life.p)}).`,
    );
  }
  if (trend?.rejected === true) {
    parts.push(
      `The fitted trend does not follow the ${formatNoun(trend.failures, 'failure')} in time (Cramér–von Mises ${formatFixed(trend.statistic, 3)}, at most ${formatFixed(trend.criticalAtFivePercent, 3)} would pass).`,
    );
  }
  if (parts.length === 0) return null;
  return {
    code: 'poor-fit',
    severity: 'caution',
    sentence: parts.join(' '),
    action:
      'Trust the steps and the age bands rather than the curve. Look for a change on one date, mixed modes, or a few bad positions.',
  };
}
