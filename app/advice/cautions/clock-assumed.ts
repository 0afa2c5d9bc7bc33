import { formatCount, formatNoun } from '~/format/number';
import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

/** Operating hours estimated from an assumed duty instead of read from a meter. */
export function clockAssumed({ findings }: ClassFacts): Caution | null {
  const { positions, positionsWithAssumedClock } = findings.extent;
  if (positionsWithAssumedClock === 0) return null;
  const which =
    positionsWithAssumedClock === positions
      ? `all ${formatNoun(positions, 'position')}`
      : `${formatCount(positionsWithAssumedClock)} of ${formatNoun(positions, 'position')}`;
  return {
    code: 'clock-assumed',
    severity: 'note',
    sentence: `The operating hours of ${which} are worked out from an assumed duty, not read from a meter. Ages are as good as that assumption.`,
    action: 'Check the hours a day on the assets that matter most, or fit an hours meter there.',
  };
}
