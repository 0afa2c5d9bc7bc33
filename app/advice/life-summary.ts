import type { History } from '~/reliability/history';
import type { Weibull } from '~/reliability/weibull';

/** An age seen to have been reached by fewer items than this supports no interval. */
export const fewestSurvivors = 5;

/** Stretches of age over which the exposure is added up. */
const stretches = 24;

/** What the pricing of a schedule needs to know of the lives behind the fit. */
export interface LifeSummary {
  readonly lives: number;
  /**
   * The longest age that at least 5 lives were seen to reach: the largest age for which 5 histories have an
   * exit no earlier, which is the 5th largest exit. Null with fewer than 5 lives.
   */
  readonly supportedAge: number | null;
  /** Exposure by age, clock units. */
  readonly exposureByAge: readonly {
    readonly from: number;
    readonly to: number;
    readonly exposure: number;
  }[];
}

export function summariseLives(histories: readonly History[]): LifeSummary {
  const exits = Float64Array.from(histories, ({ exit }) => exit).sort();
  const longest = exits.at(-1) ?? 0;
  const width = longest / stretches;
  const exposure = new Float64Array(stretches);
  for (const { entry, exit } of histories) {
    const first = Math.min(stretches - 1, Math.floor(entry / width));
    const last = Math.min(stretches - 1, Math.floor(exit / width));
    for (let band = first; band <= last; band += 1) {
      exposure[band]! += Math.max(0, Math.min(exit, (band + 1) * width) - Math.max(entry, band * width));
    }
  }
  return {
    lives: exits.length,
    supportedAge: exits.at(-fewestSurvivors) ?? null,
    exposureByAge: Array.from(exposure, (inBand, band) => ({
      from: band * width,
      to: (band + 1) * width,
      exposure: inBand,
    })).filter((band) => band.exposure > 0),
  };
}

/** Failures per clock unit at the ages under watch, were the items of this life: the mean hazard over the exposure. */
export function hazardAtWatchedAges(
  exposureByAge: LifeSummary['exposureByAge'],
  { shape, scale }: Weibull,
): number {
  let failures = 0;
  let total = 0;
  for (const { from, to, exposure } of exposureByAge) {
    failures += (exposure * ((to / scale) ** shape - (from / scale) ** shape)) / (to - from);
    total += exposure;
  }
  return failures / total;
}
