import { compareTwoRates, type CountInExposure, type TwoRates } from './two-rates';

/** What one position saw, times in one clock unit on one count. */
export interface VisitedPosition {
  /** Watched over (from, to]. */
  readonly from: number;
  readonly to: number;
  /** Planned visits, any order. */
  readonly visits: readonly number[];
  readonly failures: readonly number[];
}

export interface VisitRate {
  /** In the days after a planned visit. */
  readonly after: CountInExposure;
  /** At all other times. */
  readonly otherwise: CountInExposure;
  /** Rate after visits over rate otherwise; null where one side has no exposure. */
  readonly comparison: TwoRates | null;
}

/**
 * Failure rate within `span` after planned visits beside the rate at other times. A time t counts as
 * after a visit v when v < t ≤ v + span; spans that overlap count once. A failure found at the visit
 * itself is not its doing.
 *
 * @param confidence of the rate ratio's exact two-sided interval.
 */
export function visitRate(
  positions: readonly VisitedPosition[],
  span: number,
  confidence: number,
): VisitRate {
  let afterFailures = 0;
  let afterExposure = 0;
  let failures = 0;
  let exposure = 0;
  for (const { from, to, visits, failures: times } of positions) {
    exposure += to - from;
    const spans = spansAfterVisits(visits, span, from, to);
    for (const [start, end] of spans) afterExposure += end - start;
    for (const time of times) {
      if (!(time > from && time <= to)) continue;
      failures += 1;
      if (spans.some(([start, end]) => time > start && time <= end)) afterFailures += 1;
    }
  }
  const after = { failures: afterFailures, exposure: afterExposure };
  const otherwise = { failures: failures - afterFailures, exposure: Math.max(0, exposure - afterExposure) };
  const comparable = after.exposure > 0 && otherwise.exposure > 0;
  return { after, otherwise, comparison: comparable ? compareTwoRates(after, otherwise, confidence) : null };
}

/** Spans after visits, cut to the watch, joined where they overlap. */
function spansAfterVisits(
  visits: readonly number[],
  span: number,
  from: number,
  to: number,
): [number, number][] {
  const joined: [number, number][] = [];
  for (const visit of [...visits].sort((a, b) => a - b)) {
    const start = Math.max(visit, from);
    const end = Math.min(visit + span, to);
    if (end <= start) continue;
    const last = joined.at(-1);
    if (last && start <= last[1]) last[1] = Math.max(last[1], end);
    else joined.push([start, end]);
  }
  return joined;
}
