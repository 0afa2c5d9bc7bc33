import { constantRateBand } from '~/reliability/constant-rate-band';
import { weibullHazard } from '~/reliability/weibull';
import type { Findings } from './findings';

/** Points of the class page's charts, in the units its words use. */
export interface ClassFigures {
  /** Exposure in item-years on the calendar, in thousands of hours on operating hours. */
  readonly cumulative: {
    readonly steps: readonly { exposure: number; count: number }[];
    readonly totalExposure: number;
    readonly band: readonly { exposure: number; low: number; high: number }[];
    readonly powerLaw: readonly { exposure: number; expected: number }[];
    /** Whether every failure lies within the band at its own exposure, whatever the points the band is drawn from. */
    readonly staysInBand: boolean;
  };
  /** Ages in days or hours; rates a year, or per thousand hours. */
  readonly hazard: {
    readonly bands: readonly {
      from: number;
      to: number;
      rate: number;
      low: number;
      high: number;
      failures: number;
      exposure: number;
    }[];
    readonly curve: readonly { age: number; rate: number }[];
    readonly notSeenFrom: number;
  };
}

/** Clock units in one unit of exposure as it is spoken of. */
export const exposureUnits = { 'calendar-days': 365.25, 'operating-hours': 1000 } as const;

const curvePoints = 50;

export function classFigures({ clock, trend, life }: Findings): ClassFigures {
  const unit = exposureUnits[clock];
  const total = trend.totalExposure;
  const n = trend.failureExposures.length;
  const shares = Array.from({ length: curvePoints + 1 }, (_, index) => index / curvePoints);
  const pooledSlope = slopeOnPooledClock(trend.failureExposures, total);
  return {
    cumulative: {
      steps: trend.failureExposures.map((exposure, index) => ({
        exposure: exposure / unit,
        count: index + 1,
      })),
      totalExposure: total / unit,
      band: constantRateBand(n, shares).map(({ share, low, high }) => ({
        exposure: (share * total) / unit,
        low,
        high,
      })),
      staysInBand: staysInBand(trend.failureExposures, total),
      powerLaw:
        pooledSlope === null
          ? []
          : shares.map((share) => ({ exposure: (share * total) / unit, expected: n * share ** pooledSlope })),
    },
    hazard: {
      bands: life.hazardBands.map((band) => ({
        ...band,
        rate: band.rate * unit,
        low: band.low * unit,
        high: band.high * unit,
        exposure: band.exposure / unit,
      })),
      curve: life.fit.kind === 'fit' ? hazardCurve(life.fit, life.longestAge, unit) : [],
      notSeenFrom: life.longestAge,
    },
  };
}

/** So many failures, evenly spread, tell whether the steps stay in the band: more would take longer than they tell. */
const mostChecked = 400;

/** The count steps up at a failure: it has left the band where neither before nor after it lies within. */
function staysInBand(exposures: readonly number[], total: number): boolean {
  const every = Math.ceil(exposures.length / mostChecked);
  const checked = exposures.flatMap((exposure, before) =>
    before % every === 0 ? [{ exposure, before }] : [],
  );
  const bands = constantRateBand(
    exposures.length,
    checked.map(({ exposure }) => exposure / total),
  );
  return bands.every(({ low, high }, index) => {
    const { before } = checked[index]!;
    return before + 1 >= low && before <= high;
  });
}

/**
 * Slope of the power law fitted to the pooled clock alone, n / Σ ln(T/s): what the drawn curve follows.
 * Source: Crow 1975. Null with fewer than two failures, where a curve would only repeat the dots.
 */
function slopeOnPooledClock(exposures: readonly number[], total: number): number | null {
  if (exposures.length < 2) return null;
  const sum = exposures.reduce((logs, exposure) => logs + Math.log(total / exposure), 0);
  return sum > 0 ? exposures.length / sum : null;
}

/** From a little above age 0, where a falling hazard has no bound. */
function hazardCurve(fit: { shape: number; scale: number }, longestAge: number, unit: number) {
  return Array.from({ length: curvePoints }, (_, index) => {
    const age = (longestAge * (index + 1)) / curvePoints;
    return { age, rate: weibullHazard(fit, age) * unit };
  });
}
