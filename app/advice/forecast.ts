import { meanTimeInterval } from '~/reliability/exponential';
import { expectedFailuresAtConstantRate } from '~/reliability/expected-failures';
import { FailuresToCome } from '~/reliability/failures-to-come';
import { CountMixture } from '~/reliability/count-mixture';
import type { Position } from '~/reliability/position';
import type { NoPowerLawFit, PowerLawFit } from '~/reliability/power-law';
import { weibullDraws } from '~/reliability/quasi-random-draws';
import { compareTwoRates, type CountInExposure } from '~/reliability/two-rates';
import type { Weibull } from '~/reliability/weibull';
import {
  forecastConfidence,
  forecastMonths,
  type ForecastFindings,
  type forecastBases,
} from './forecast-findings';
import { exposureToCome, itemsInPlace, type ItemsInPlace } from './items-in-place';
import { daysAMonth } from './practicable-interval';
import { fewestFailuresForVerdict } from './verdict';

export interface ForecastInput {
  readonly positions: readonly Position[];
  /** Day number: the forecast starts here. */
  readonly now: number;
  /** Failures and exposure of all records, and of the year before `now`; clock units. */
  readonly overall: CountInExposure;
  readonly lastYear: CountInExposure;
  /** Of the life clock, all modes together. */
  readonly fit: PowerLawFit | NoPowerLawFit;
  /** Today's planned renewal, clock units; null where there is none. */
  readonly currentInterval: number | null;
  readonly leadTimeDays: number | null;
  /** Share of lead times in which the spares held are to be enough, in (0, 1). */
  readonly serviceLevel: number;
}

/** The last year counts alone where an exact test tells its rate from the rate before at this level. */
const rateChangedAt = 0.05;

/**
 * A forecast's range needs no 400 draws: the first 40 of the same sequence fill the square evenly too, and
 * move an end of the range by a count at most where counts are small (held by a test).
 */
const forecastDraws = 40;

/** Grid steps a month ahead or less, and their most; the fit itself gets four times as many. */
const stepsOfAMonth = 4;
const mostSteps = 12;
const finer = 4;

interface Expected {
  readonly mean: number;
  readonly mixture: Pick<CountMixture, 'quantile'>;
}

/**
 * Failures expected of the class in the next 1, 3 and 12 months, each with its 90 % range, the mean time
 * between failures with its interval, and the spares a lead time needs.
 *
 * Items whose age matters (interval of the life shape on one side of 1, at least 5 failures) fail by their present ages,
 * renewals in between and today's planned interval included; positions of unknown age are spread over the
 * known ages, and each clock is taken to run at the mean pace. All others fail at a constant rate. Both
 * ranges mix the scatter of such counts with what is not known of the rate or the shape.
 */
export function forecast(input: ForecastInput): ForecastFindings {
  const { now, leadTimeDays, serviceLevel } = input;
  const inPlace = itemsInPlace(input.positions, now);
  const { basis, rate } = basisOf(input, inPlace);
  if (inPlace.positions.length === 0 || !(rate.exposure > 0)) return { kind: 'nothing-to-go-by' };
  const expect = basis === 'ages' ? byAges(input, inPlace) : atRate(rate, inPlace, now);
  const tail = (1 - forecastConfidence) / 2;
  const demand = leadTimeDays === null ? null : expect(leadTimeDays);
  return {
    kind: 'forecast',
    basis,
    confidence: forecastConfidence,
    positions: inPlace.positions.length,
    agesUnknown: inPlace.agesUnknown,
    periods: forecastMonths.map((months) => {
      const { mean, mixture } = expect(months * daysAMonth);
      return { months, mean, low: mixture.quantile(tail), high: mixture.quantile(1 - tail) };
    }),
    meanTime: {
      value: rate.failures === 0 ? null : rate.exposure / rate.failures,
      ...meanTimeInterval(rate.failures, rate.exposure, forecastConfidence),
      ...rate,
    },
    spares:
      demand === null || leadTimeDays === null
        ? null
        : {
            leadTimeDays,
            serviceLevel,
            meanDemand: demand.mean,
            spares: demand.mixture.quantile(serviceLevel),
          },
  };
}

function basisOf(
  { fit, overall, lastYear }: ForecastInput,
  { ages }: ItemsInPlace,
): { basis: (typeof forecastBases)[number]; rate: CountInExposure } {
  const count = ({ failures, exposure }: CountInExposure) => ({ failures, exposure });
  const ageMatters =
    fit.kind === 'fit' &&
    fit.failures >= fewestFailuresForVerdict &&
    ((fit.interval.low ?? 0) > 1 || (fit.interval.high ?? Infinity) < 1);
  if (ageMatters && ages.length > 0) return { basis: 'ages', rate: count(overall) };
  const before = {
    failures: overall.failures - lastYear.failures,
    exposure: overall.exposure - lastYear.exposure,
  };
  const changed =
    before.failures >= 0 &&
    before.exposure > 0 &&
    lastYear.exposure > 0 &&
    compareTwoRates(lastYear, before, forecastConfidence).p < rateChangedAt;
  return changed
    ? { basis: 'last-year-rate', rate: count(lastYear) }
    : { basis: 'rate', rate: count(overall) };
}

function atRate(rate: CountInExposure, inPlace: ItemsInPlace, now: number): (days: number) => Expected {
  return (days) => {
    const exposure = exposureToCome(inPlace, now, days);
    const expected = expectedFailuresAtConstantRate(
      rate.failures,
      rate.exposure,
      exposure,
      forecastConfidence,
    );
    return { mean: expected.mean, mixture: expected };
  };
}

function byAges(
  { fit, now, currentInterval }: ForecastInput,
  inPlace: ItemsInPlace,
): (days: number) => Expected {
  if (fit.kind !== 'fit') throw new TypeError('a forecast by ages needs a fit');
  const ages = [...inPlace.ages, ...spreadOver(inPlace.ages, inPlace.agesUnknown)];
  const draws: Weibull[] = weibullDraws(fit).slice(0, forecastDraws);
  return (days) => {
    const horizon = exposureToCome(inPlace, now, days) / inPlace.positions.length;
    if (!(horizon > 0)) return { mean: 0, mixture: new CountMixture([0]) };
    const ahead = new FailuresToCome({ ages, horizon, plannedInterval: currentInterval });
    const steps = Math.min(mostSteps, Math.max(stepsOfAMonth, Math.ceil(days / daysAMonth)));
    const means = draws.map((draw) => ahead.expected(draw, steps));
    const dispersion = ahead.dispersion(fit, finer * steps);
    return { mean: ahead.expected(fit, finer * steps), mixture: new CountMixture(means, dispersion) };
  };
}

/** So many ages as the known ones are spread: their quantiles at the midpoints of equal parts. */
function spreadOver(known: readonly number[], count: number): number[] {
  const sorted = Float64Array.from(known).sort();
  return Array.from(
    { length: count },
    (_, index) => sorted[Math.floor(((index + 0.5) / count) * sorted.length)]!,
  );
}
