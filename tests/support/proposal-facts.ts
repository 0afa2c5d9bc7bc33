import type { ProposalFacts } from '~/advice/proposal-facts';
import type { Change, PricedSchedule, ScheduleFindings } from '~/advice/schedule-findings';

export const month = 30.4375;
export const marks = { itemSingular: 'seal', itemPlural: 'seals', statutory: false, endangersPeople: false };

/** A change that saves money in most draws unless told otherwise. */
export function change(interval: number | null, value = 250_000, share = 0.94): Change {
  return {
    interval,
    costPerYear: { value: 500_000, low: 400_000, high: 600_000 },
    savingPerYear: { value, low: value - 200_000, high: value + 200_000 },
    share,
    breakEvenFailureMinor: 62_000,
  };
}

export interface ScheduleCase {
  readonly today?: number | null;
  readonly exact?: number | null;
  readonly best?: number | null;
  readonly beyondData?: boolean;
  readonly supportedAge?: number | null;
  readonly share?: number;
  readonly value?: number;
  readonly changes?: Partial<PricedSchedule['changes']>;
}

const basis = {
  policy: 'age-replacement',
  unitsAYear: 365.25,
  fit: { shape: 2.6, scale: 400, covariance: { lnShape: 0.01, lnScale: 0.003, cross: 0.001 } },
  exposureByAge: [{ from: 0, to: 900, exposure: 9000 }],
} satisfies ScheduleFindings['basis'];

/** Seals renewed every year today and best every 5 months, with what differs. */
export function priced({
  today = 365,
  exact = 155,
  share = 0.94,
  value,
  ...given
}: ScheduleCase = {}): PricedSchedule {
  const best = given.best === undefined ? (exact === null ? null : 5 * month) : given.best;
  return {
    kind: 'priced',
    basis,
    current: { interval: today, task: today === null ? null : 'Seal replacement' },
    positions: 30,
    supportedAge: given.supportedAge === undefined ? 900 : given.supportedAge,
    failureFinding: null,
    policy: 'age-replacement',
    costs: { plannedMinor: 18_000, failureMinor: 190_000 },
    best: { exact, interval: best, beyondData: given.beyondData ?? false, range: { low: 130, high: 180 } },
    today: { value: 750_000, low: 600_000, high: 900_000 },
    changes: {
      best: best === null ? null : change(best, value, share),
      stop: change(null, value, share),
      trial: null,
      bestBeyondData: null,
      ...given.changes,
    },
    curve: [],
  };
}

/** Wearing seals on a steady trend, with what differs. */
export function facts(differences: Partial<ProposalFacts> = {}): ProposalFacts {
  return {
    marks,
    clock: 'calendar-days',
    currency: 'GBP',
    verdict: 'wear-out',
    trend: 'level',
    schedule: priced(),
    maskedAge: null,
    failuresToSettle: { more: 7 },
    modesDiffer: false,
    badPositions: [],
    ...differences,
  };
}

export const withoutCosts = (today: number | null): ScheduleFindings => ({
  kind: 'costs-missing',
  missing: ['planned', 'failure'],
  basis,
  current: { interval: today, task: null },
  positions: 30,
  supportedAge: 900,
  failureFinding: null,
});
