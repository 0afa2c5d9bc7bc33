import type { Verdict } from '~/advice/verdict';

import { VERDICT_COLOUR } from './verdict';

const CURVE: Record<Verdict, string> = {
  'wear-out': 'M2 17C14 17 26 15 38 3',
  memoryless: 'M2 10H38',
  'early-life': 'M2 3C10 14 22 17 38 17',
  undecided: 'M2 10H38',
};

/** A verdict's own hazard curve against age: rising, level, falling, or a dashed line of nothing known. */
export function VerdictGlyph({ verdict, className = 'w-8' }: { verdict: Verdict; className?: string }) {
  return (
    <svg viewBox="0 0 40 20" aria-hidden="true" focusable="false" className={`inline-block ${className}`}>
      <path
        d={CURVE[verdict]}
        fill="none"
        stroke={VERDICT_COLOUR[verdict]}
        strokeWidth="3.4"
        strokeLinecap={verdict === 'undecided' ? 'butt' : 'round'}
        strokeDasharray={verdict === 'undecided' ? '6.5 4.5' : undefined}
      />
    </svg>
  );
}
