/** The trade's words for how an item's failure rate goes with its age. */
export type VerdictCode = 'wear-out' | 'memoryless' | 'early-life' | 'undecided';

/** Whether a class fails more often than it used to. */
export type TrendCode = 'rising' | 'falling' | 'level' | 'unclear';

/** Each verdict's colour as a token of app.css; always beside a word and a glyph, never alone. */
export const VERDICT_COLOUR: Record<VerdictCode, string> = {
  'wear-out': 'var(--rust)',
  memoryless: 'var(--slate)',
  'early-life': 'var(--moss)',
  undecided: 'var(--grey)',
};
