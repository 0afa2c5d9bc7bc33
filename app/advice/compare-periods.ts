import { formatFixed, formatNoun, formatP, formatPercent } from '~/format/number';
import type { Position } from '~/reliability/position';
import { compareTwoRates, type CountInExposure } from '~/reliability/two-rates';
import { isFailureOf, watchedEvents } from '~/reliability/watched-events';

/** Failures and running time of all positions within a period. */
export function countPeriod(positions: readonly Position[], from: number, to: number): CountInExposure {
  let failures = 0;
  let exposure = 0;
  for (const position of positions) {
    const start = Math.max(from, position.watchFrom);
    const end = Math.min(to, position.watchTo);
    if (end <= start) continue;
    exposure += position.usage.at(end) - position.usage.at(start);
    failures += watchedEvents(position).filter(
      (event) => isFailureOf(event, undefined) && event.at >= from && event.at < to,
    ).length;
  }
  return { failures, exposure };
}

export interface PeriodComparison {
  readonly before: CountInExposure;
  readonly after: CountInExposure;
  /** Rate after over rate before; null where nothing failed before. */
  readonly ratio: number | null;
  /** Exact interval of the ratio; the upper end is null where nothing failed before. */
  readonly low: number;
  readonly high: number | null;
  readonly confidence: number;
  /** Two-sided, of equal rates. */
  readonly p: number;
  /** 'unclear' where the interval holds 1. */
  readonly change: 'fewer' | 'more' | 'unclear';
  readonly sentence: string;
}

/**
 * Whether a class fails less often after a change than before it: the exact conditional test of two Poisson
 * rates (Przyborowski & Wilenski 1940). It knows nothing of what else changed at the same time.
 *
 * @returns null where one of the periods holds no running time.
 */
export function comparePeriods(
  before: CountInExposure,
  after: CountInExposure,
  confidence = 0.9,
): PeriodComparison | null {
  if (!(before.exposure > 0 && after.exposure > 0)) return null;
  const { ratio, lower, upper, p } = compareTwoRates(after, before, confidence);
  const change = upper !== null && upper < 1 ? 'fewer' : lower > 1 ? 'more' : 'unclear';
  const comparison = { before, after, ratio, low: lower, high: upper, confidence, p, change } as const;
  return { ...comparison, sentence: sentenceFor(comparison) };
}

function sentenceFor({
  before,
  after,
  ratio,
  low,
  high,
  confidence,
  p,
  change,
}: Omit<PeriodComparison, 'sentence'>): string {
  const counts = `${formatNoun(after.failures, 'failure')} after the change, ${formatNoun(before.failures, 'failure')} before it`;
  const ends =
    high === null ? `${formatFixed(low, 2)} or more` : `${formatFixed(low, 2)} to ${formatFixed(high, 2)}`;
  const numbers =
    ratio === null
      ? formatP(p)
      : `${formatFixed(ratio, 2)} times the rate, ${formatPercent(confidence)} interval ${ends}, ${formatP(p)}`;
  const meaning = {
    fewer: 'The class fails less often than before.',
    more: 'The class fails more often than before.',
    unclear: 'The two periods cannot be told apart yet.',
  }[change];
  return `${meaning} ${counts}: ${numbers}.`;
}
