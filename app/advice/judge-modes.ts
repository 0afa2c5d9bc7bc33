import type { ModesFindings } from './mode-findings';
import { judgeVerdict, type Verdict } from './verdict';

/** What is said of one failure mode, beside the verdict on all modes together. */
export interface ModeVerdict {
  readonly modeId: string;
  readonly name: string;
  readonly failures: number;
  readonly verdict: Verdict;
  /** 90 % interval of the shape; null where it could not be estimated. Infinity where it is open above. */
  readonly shapeInterval: { readonly low: number; readonly high: number } | null;
}

/** The one-sided p of wear-out of each mode, in order, for the run's false-discovery control; null without a test. */
export function modeTestsOf({ each }: ModesFindings): (number | null)[] {
  return each.map(({ life }) => life.memorylessTest?.pWearOut ?? null);
}

/**
 * Judges each mode by the same rule as a class.
 *
 * @param wearOutPasses for each mode, in order, whether its test holds up among all classes and modes of the run.
 */
export function judgeModes({ each }: ModesFindings, wearOutPasses: readonly boolean[]): ModeVerdict[] {
  return each.map(({ modeId, name, failures, life: { fit } }, index) => {
    const shapeInterval =
      fit.kind === 'fit'
        ? { low: fit.shapeInterval.low ?? 0, high: fit.shapeInterval.high ?? Infinity }
        : null;
    const verdict = judgeVerdict({
      failures: fit.failures,
      shapeInterval,
      wearOutPasses: wearOutPasses[index] ?? false,
    });
    return { modeId, name, failures, verdict, shapeInterval };
  });
}
