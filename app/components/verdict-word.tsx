import type { ReactNode } from 'react';

import type { Verdict } from '~/advice/verdict';

import { VERDICT_COLOUR } from './verdict';
import { VerdictGlyph } from './verdict-glyph';

interface VerdictWordProps {
  verdict: Verdict;
  /** Words in place of the bare verdict: "memoryless up to 180 days". */
  children?: ReactNode;
}

/** Glyph, word and colour together. */
export function VerdictWord({ verdict, children }: VerdictWordProps) {
  return (
    <span
      className="inline-flex items-center gap-[0.5em] font-bold whitespace-nowrap"
      style={{ color: VERDICT_COLOUR[verdict] }}
    >
      <VerdictGlyph verdict={verdict} className="w-[1.7em] flex-none" />
      <span>{children ?? verdict}</span>
    </span>
  );
}
