import { FailuresToCome, type WearOutPeriod } from './failures-to-come';
import { CountMixture } from './count-mixture';
import { chiSquaredQuantile } from './special-functions';
import type { Weibull } from './weibull';

/** Failures to come in one period, with the middle range of what may be seen. */
export interface ExpectedFailures {
  readonly mean: number;
  /** Whole numbers; together they hold at least the confidence asked for. */
  readonly lower: number;
  readonly upper: number;
  /** Smallest k with P(failures ≤ k) ≥ chance, for spares at a service level. */
  readonly quantile: (chance: number) => number;
}

/** Equally likely rates a constant rate is spread over. */
const rateParts = 40;

/**
 * Constant rate: mean = rate × exposure. What is not known of the rate is the gamma law of
 * χ²(2r + 1)/(2T), r failures in exposure T (Jeffreys' prior; Gelman et al. 2013), taken at the midpoints
 * of 40 equally likely parts, so that r = 0 has a range too.
 *
 * @param failures r seen, and `exposure` T > 0 they were seen in.
 * @param exposureToCome at least 0, in the same unit.
 * @param confidence of the two-sided range, in (0, 1).
 */
export function expectedFailuresAtConstantRate(
  failures: number,
  exposure: number,
  exposureToCome: number,
  confidence: number,
): ExpectedFailures {
  if (!(exposure > 0)) throw new RangeError(`exposure ${exposure} is not above 0`);
  const means = Array.from({ length: rateParts }, (_, part) => {
    const quantile = chiSquaredQuantile((part + 0.5) / rateParts, 2 * failures + 1);
    return (quantile / (2 * exposure)) * exposureToCome;
  });
  return summarise((failures / exposure) * exposureToCome, means, confidence);
}

/**
 * Wear-out: each item fails within the period with its conditional chance given its age; what is fitted
 * then starts at age 0 and may fail again (renewal equation), and items that reach the planned interval
 * are renewed there without a failure. The range mixes the scatter of such counts over the draws of the fit.
 *
 * @param confidence of the two-sided range, in (0, 1).
 */
export function expectedFailuresByAge(
  period: WearOutPeriod,
  fit: Weibull,
  draws: readonly Weibull[],
  confidence: number,
): ExpectedFailures {
  if (period.ages.length === 0) return summarise(0, [0], confidence);
  const ahead = new FailuresToCome(period);
  const mean = ahead.expected(fit, fineSteps);
  const means = draws.map((draw) => ahead.expected(draw, coarseSteps));
  return summarise(
    mean,
    means.length > 0 ? means : [mean],
    confidence,
    ahead.dispersion(fit, dispersionSteps),
  );
}

/** Grid steps within the period: for the fit itself, and for each draw. */
const fineSteps = 192;
const coarseSteps = 12;
/** Steps for the dispersion, of the fit alone: it moves little from draw to draw. */
const dispersionSteps = 48;

function summarise(
  mean: number,
  means: readonly number[],
  confidence: number,
  dispersion = 1,
): ExpectedFailures {
  const mixture = new CountMixture(means, dispersion);
  const tail = (1 - confidence) / 2;
  return {
    mean,
    lower: mixture.quantile(tail),
    upper: mixture.quantile(1 - tail),
    quantile: (chance) => mixture.quantile(chance),
  };
}
