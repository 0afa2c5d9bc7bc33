import { formatCalendarDate } from '~/format/date';
import type { Verdict } from '~/advice/verdict';
import { plotFrame, tenth, textWidth, type ChartSize } from './plot-frame';

/** Nights on end with one verdict; ISO calendar dates. */
export interface VerdictRun {
  readonly verdict: Verdict;
  readonly from: string;
  readonly to: string;
  readonly nights: number;
  /** Failures behind the last of them. */
  readonly n: number;
  /** What brought the verdict about, in a sentence; null where nobody noted it. */
  readonly why: string | null;
}

export type VerdictHistoryLayout = NonNullable<ReturnType<typeof layoutVerdictHistory>>;

const GLYPH_WIDTH = 32;

const daysBetween = (from: string, to: string) => (Date.parse(to) - Date.parse(from)) / 86_400_000;

/**
 * One stretch a run, as wide as its share of the time, with its glyph and its word where they fit; the
 * first and last night named below. Null without a run.
 *
 * @param runs the oldest first.
 */
export function layoutVerdictHistory(runs: readonly VerdictRun[], size: ChartSize) {
  const first = runs[0];
  const last = runs.at(-1);
  if (first === undefined || last === undefined) return null;
  const frame = plotFrame(size, 66, { top: 26, right: 4, bottom: 26, left: 4 });
  const { plot } = frame;
  // The last night counts as a day, so that a single one has a width.
  const total = daysBetween(first.from, last.to) + 1;
  const stretches = runs.map((run, index) => {
    const next = runs[index + 1];
    const days = next === undefined ? daysBetween(run.from, run.to) + 1 : daysBetween(run.from, next.from);
    const x = plot.x + (daysBetween(first.from, run.from) / total) * plot.width;
    const width = (days / total) * plot.width;
    return {
      run,
      x: tenth(x),
      width: tenth(Math.max(0.5, width)),
      glyphX: width >= GLYPH_WIDTH + 8 ? tenth(x + 2) : null,
      word: width >= textWidth(run.verdict, true) + 4 ? run.verdict : null,
    };
  });
  const short = (date: string) => formatCalendarDate(date, 'short');
  const dates =
    first.from === last.to
      ? [{ text: short(first.from), x: plot.x, anchor: 'start' as const }]
      : [
          { text: short(first.from), x: plot.x, anchor: 'start' as const },
          { text: short(last.to), x: plot.x + plot.width, anchor: 'end' as const },
        ];
  return { frame, stretches, dates };
}
