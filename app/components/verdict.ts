import type { Verdict } from '~/advice/verdict';

/** Each verdict's colour as a token of app.css; always beside a word and a glyph, never alone. */
export const VERDICT_COLOUR: Record<Verdict, string> = {
  'wear-out': 'var(--rust)',
  memoryless: 'var(--slate)',
  'early-life': 'var(--moss)',
  undecided: 'var(--grey)',
};
