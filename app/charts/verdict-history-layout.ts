import { formatCalendarDate } from '~/format/date';
import type { Verdict } from '~/advice/verdict';
import { plotFrame, tenth, textWidth, type ChartSize } from './plot-frame';

export interface VerdictNight {
  /** ISO calendar date. */
  readonly date: string;
  readonly verdict: Verdict;
  /** Failures behind it. */
  readonly n: number;
}

/** Nights on end with one verdict. */
export interface VerdictRun {
  readonly verdict: Verdict;
  readonly from: string;
  readonly to: string;
  readonly nights: number;
  readonly n: number;
}

export type VerdictHistoryLayout = NonNullable<ReturnType<typeof layoutVerdictHistory>>;

const ISO_DATE = /^\d{4}-\d{2}-\d{2}$/;

/** Nights in order, put together into runs of one verdict. */
export function verdictRuns(nights: readonly VerdictNight[]): VerdictRun[] {
  const runs: VerdictRun[] = [];
  const ordered = nights
    .filter(({ date }) => ISO_DATE.test(date))
    .sort((a, b) => a.date.localeCompare(b.date));
  for (const { date, verdict, n } of ordered) {
    const open = runs.at(-1);
    if (open?.verdict === verdict) runs[runs.length - 1] = { ...open, to: date, nights: open.nights + 1, n };
    else runs.push({ verdict, from: date, to: date, nights: 1, n });
  }
  return runs;
}

const GLYPH_WIDTH = 32;

/**
 * One stretch a run, as wide as its share of the nights, with its glyph and its word where they fit; the
 * first and last night named below. Null without a night.
 */
export function layoutVerdictHistory(nights: readonly VerdictNight[], size: ChartSize) {
  const runs = verdictRuns(nights);
  const first = runs[0];
  const last = runs.at(-1);
  if (first === undefined || last === undefined) return null;
  const frame = plotFrame(size, 66, { top: 26, right: 4, bottom: 26, left: 4 });
  const { plot } = frame;
  const total = runs.reduce((sum, run) => sum + run.nights, 0);
  let before = 0;
  const stretches = runs.map((run) => {
    const x = plot.x + (before / total) * plot.width;
    const width = (run.nights / total) * plot.width;
    before += run.nights;
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
