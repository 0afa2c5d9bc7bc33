/** What a class's life clock says of its items; the trade's words. */
export const verdicts = ['wear-out', 'memoryless', 'early-life', 'undecided'] as const;
export type Verdict = (typeof verdicts)[number];

/** A shape above this is stronger wear-out than "memoryless" may leave open. */
export const strongestWearOutOfMemoryless = 1.5;

/** With fewer failures than this no verdict is given at all. */
export const fewestFailuresForVerdict = 5;

export interface VerdictGrounds {
  /** Failures on the life clock. */
  readonly failures: number;
  /** 90 % interval of the life shape; null when it could not be estimated or there is no usable life clock. */
  readonly shapeInterval: { readonly low: number; readonly high: number } | null;
  /** Whether the one-sided p of wear-out passes Benjamini–Hochberg at 10 % over all classes of the run. */
  readonly wearOutPasses: boolean;
}

/**
 * The verdict on a life clock.
 *
 * wear-out: the interval lies above 1 and the evidence holds up among all classes looked at. memoryless:
 * the interval holds 1 and rules stronger wear-out than 1.5 out; "not significant" alone never is.
 * early-life: the interval lies below 1. Anything else is undecided.
 *
 * Source: Intervale's own decision rule on the profile-likelihood interval of the Weibull shape (Meeker &
 * Escobar 1998) with false-discovery control (Benjamini & Hochberg 1995).
 */
export function judgeVerdict({ failures, shapeInterval, wearOutPasses }: VerdictGrounds): Verdict {
  if (failures < fewestFailuresForVerdict || shapeInterval === null) return 'undecided';
  const { low, high } = shapeInterval;
  if (low > 1) return wearOutPasses ? 'wear-out' : 'undecided';
  if (high < 1) return 'early-life';
  return high <= strongestWearOutOfMemoryless ? 'memoryless' : 'undecided';
}
