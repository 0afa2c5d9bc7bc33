import { formatClock } from '~/format/number';
import { clockUnit } from '../clock-unit';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/** The interval of least cost lies beyond the longest age that at least five items were seen to reach. */
export function beyondData({ findings, marks, pricing }: CautionFacts): Caution | null {
  const { bestInterval, supportedAge } = pricing;
  if (bestInterval === null || bestInterval <= (supportedAge ?? 0)) return null;
  const unit = clockUnit(findings.clock);
  const seen =
    supportedAge === null
      ? `fewer than five ${marks.itemPlural} of known age were watched at all`
      : `only up to ${formatClock(supportedAge, unit)} have at least five ${marks.itemPlural} been seen to last`;
  return {
    code: 'beyond-data',
    severity: 'caution',
    sentence: `The interval of least cost comes out at ${formatClock(bestInterval, unit)}, but ${seen}. Beyond that the curve is a guess.`,
    action:
      supportedAge === null
        ? 'Set no interval on this; watch on.'
        : `Go no further than ${formatClock(supportedAge, unit)} for now, watch what lasts, and lengthen step by step.`,
  };
}
