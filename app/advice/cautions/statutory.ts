import type { ClassFacts } from '../class-facts';
import type { Caution } from '../conclusion';

/** Set on the class: law or a safety code prescribes its maintenance. */
export function statutory({ marks }: ClassFacts): Caution | null {
  if (!marks.statutory) return null;
  return {
    code: 'statutory',
    severity: 'stop',
    sentence: `Maintenance of ${marks.itemPlural} is required by law or code. What is shown here is evidence only and allows nothing less than the code asks.`,
    action:
      'Follow the local code and its intervals. Take this evidence to the responsible licensed person; nothing changes here without them.',
  };
}
