import { normalQuantile } from './special-functions';

/** Standard error of ln β̂ times √n for n uncensored Weibull lives (Nelson 1982; Meeker & Escobar 1998). */
const uncensoredStandardErrorRootN = 0.78;
const memorylessUpperEnd = 1.5;
const wearOutShape = 2;
const chanceToSettle = 0.8;
/** A verdict needs this many failures whatever the interval says. */
const fewestFailures = 5;

export interface FailuresToSettle {
  /** Failures in all for a true β of 1 to give an upper end of at most 1.5 in 80 % of cases. */
  readonly forMemoryless: number;
  /** Failures in all for a true β of 2 to give a lower end above 1 in 80 % of cases. */
  readonly forWearOut: number;
  /** The larger of the two: with so many failures in all the question is likely to be settled. */
  readonly total: number;
  /** How many more than there are now; 0 where there are as many already. */
  readonly more: number;
  readonly governedBy: 'memoryless' | 'wear-out';
}

/**
 * How many more failures would settle an undecided verdict. ln β̂ is taken as normal with a standard error
 * that shrinks as 1/√n: from the present fit, or 0.78/√n before there is one. With se = c/√n the upper end
 * for β = 1 is at most 1.5 with the asked chance when (z_end + z_chance) se ≤ ln 1.5, and the lower end for
 * β = 2 is above 1 when (z_end + z_chance) se < ln 2.
 *
 * @param failures how many there are now.
 * @param lnShapeStandardError of the present fit, or null without one.
 * @param level of the two-sided interval.
 */
export function failuresToSettle(
  failures: number,
  lnShapeStandardError: number | null,
  level = 0.9,
): FailuresToSettle {
  const rootNError =
    lnShapeStandardError === null || failures === 0
      ? uncensoredStandardErrorRootN
      : lnShapeStandardError * Math.sqrt(failures);
  const reach = normalQuantile((1 + level) / 2) + normalQuantile(chanceToSettle);
  const ratioMemoryless = ((reach * rootNError) / Math.log(memorylessUpperEnd)) ** 2;
  const ratioWearOut = ((reach * rootNError) / Math.log(wearOutShape)) ** 2;
  const forMemoryless = Math.max(fewestFailures, Math.ceil(ratioMemoryless));
  const forWearOut = Math.max(fewestFailures, Math.floor(ratioWearOut) + 1);
  const total = Math.max(forMemoryless, forWearOut);
  return {
    forMemoryless,
    forWearOut,
    total,
    more: Math.max(0, total - failures),
    governedBy: forMemoryless >= forWearOut ? 'memoryless' : 'wear-out',
  };
}
