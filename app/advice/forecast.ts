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
  /** The site a position stands at. */
  readonly siteOf: (positionId: string) => { siteId: string; siteName: string };
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

/** What is expected of the class in a period, and of a part of its items in the same. */
interface ExpectedOfClass extends Expected {
  readonly ofPart: (part: ItemsInPlace) => Expected;
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
  const periods = forecastMonths.map((months) => ({ months, expected: expect(months * daysAMonth) }));
  const told = ({ mean, mixture }: Expected) => ({
    mean,
    low: mixture.quantile(tail),
    high: mixture.quantile(1 - tail),
  });
  return {
    kind: 'forecast',
    basis,
    confidence: forecastConfidence,
    positions: inPlace.positions.length,
    agesUnknown: inPlace.agesUnknown,
    periods: periods.map(({ months, expected }) => ({ months, ...told(expected) })),
    sites: bySite(inPlace.positions, input.siteOf).map(({ siteId, siteName, positions }) => {
      const part = itemsInPlace(positions, now);
      return {
        siteId,
        siteName,
        positions: positions.length,
        periods: periods.map(({ months, expected }) => ({ months, ...told(expected.ofPart(part)) })),
        spares: demand === null ? null : demand.ofPart(part).mixture.quantile(input.serviceLevel),
      };
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

function bySite(
  positions: readonly Position[],
  siteOf: ForecastInput['siteOf'],
): { siteId: string; siteName: string; positions: Position[] }[] {
  const sites = new Map<string, { siteId: string; siteName: string; positions: Position[] }>();
  for (const position of positions) {
    const site = siteOf(position.id);
    const held = sites.get(site.siteId) ?? { ...site, positions: [] };
    held.positions.push(position);
    sites.set(site.siteId, held);
  }
  return [...sites.values()].sort((a, b) => a.siteName.localeCompare(b.siteName, 'en'));
}

function atRate(
  rate: CountInExposure,
  inPlace: ItemsInPlace,
  now: number,
): (days: number) => ExpectedOfClass {
  return (days) => {
    const ofPart = (part: ItemsInPlace): Expected => {
      const { failures, exposure } = rate;
      const ahead = exposureToCome(part, now, days);
      const expected = expectedFailuresAtConstantRate(failures, exposure, ahead, forecastConfidence);
      return { mean: expected.mean, mixture: expected };
    };
    return { ...ofPart(inPlace), ofPart };
  };
}

function byAges(
  { fit, now, currentInterval }: ForecastInput,
  inPlace: ItemsInPlace,
): (days: number) => ExpectedOfClass {
  if (fit.kind !== 'fit') throw new TypeError('a forecast by ages needs a fit');
  const draws: Weibull[] = weibullDraws(fit).slice(0, forecastDraws);
  const nothing: Expected = { mean: 0, mixture: new CountMixture([0]) };
  const aheadOf = (part: ItemsInPlace, days: number): FailuresToCome | null => {
    const horizon = exposureToCome(part, now, days) / part.positions.length;
    const known = part.ages.length > 0 ? part.ages : inPlace.ages;
    const ages = [...part.ages, ...spreadOver(known, part.agesUnknown)];
    return horizon > 0 ? new FailuresToCome({ ages, horizon, plannedInterval: currentInterval }) : null;
  };
  return (days) => {
    const ahead = aheadOf(inPlace, days);
    if (ahead === null) return { ...nothing, ofPart: () => nothing };
    const steps = Math.min(mostSteps, Math.max(stepsOfAMonth, Math.ceil(days / daysAMonth)));
    const mean = ahead.expected(fit, finer * steps);
    const means = draws.map((draw) => ahead.expected(draw, steps));
    const dispersion = ahead.dispersion(fit, finer * steps);
    // A part has its own mean from its own ages; what is not known of the life, and how evenly it fails, are the class's.
    const ofPart = (part: ItemsInPlace): Expected => {
      const share = mean > 0 ? (aheadOf(part, days)?.expected(fit, finer * steps) ?? 0) / mean : 0;
      const mixture = new CountMixture(
        means.map((one) => one * share),
        dispersion,
      );
      return { mean: mean * share, mixture };
    };
    return { mean, mixture: new CountMixture(means, dispersion), ofPart };
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
