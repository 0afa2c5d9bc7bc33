/** Whether the class as a whole fails more often than it used to. */
export const trends = ['rising', 'falling', 'level', 'unclear'] as const;
export type Trend = (typeof trends)[number];

/** A slope whose 90 % interval stays inside these is as good as level. */
const levelFrom = 0.67;
const levelTo = 1.5;

export interface TrendGrounds {
  /** 90 % interval of the power-law slope on the asset clock; null when it could not be estimated. */
  readonly slopeInterval: { readonly low: number; readonly high: number } | null;
  /** Whether the two-sided Laplace p passes Benjamini–Hochberg at 10 % over all classes of the run. */
  readonly laplacePasses: boolean;
}

/**
 * The trend word: rising or falling when the Laplace test holds up among all classes and the slope's
 * interval lies on one side of 1; level when not so and the interval stays within 0.67–1.5; else unclear.
 *
 * Source: Intervale's own rule on the Laplace test (Cox & Lewis 1966) and the power-law slope (Crow 1975).
 */
export function judgeTrend({ slopeInterval, laplacePasses }: TrendGrounds): Trend {
  if (slopeInterval === null) return 'unclear';
  const { low, high } = slopeInterval;
  if (laplacePasses && low > 1) return 'rising';
  if (laplacePasses && high < 1) return 'falling';
  return low >= levelFrom && high <= levelTo ? 'level' : 'unclear';
}
