import { meanTimeInterval } from '~/reliability/exponential';
import { approximateFailureFindingInterval, failureFindingInterval } from '~/reliability/failure-finding';
import type { NoPowerLawFit, PowerLawFit } from '~/reliability/power-law';
import { weibullDraws, type UncertainWeibull } from '~/reliability/quasi-random-draws';
import {
  ageReplacementPolicy,
  blockReplacementPolicy,
  costCurve,
  minimalRepairPolicy,
  scheduleValue,
  type PricedInterval,
  type RenewalPolicy,
} from '~/reliability/schedule-value';
import { weibullMeanLife, type Weibull } from '~/reliability/weibull';
import type { ClockKind } from './class-evidence';
import { hazardAtWatchedAges, type LifeSummary } from './life-summary';
import { practicableInterval } from './practicable-interval';
import type {
  Change,
  FailureFinding,
  PriceBasis,
  PricedSchedule,
  ScheduleFindings,
} from './schedule-findings';
import { trialInterval } from './trial-interval';

export interface ScheduleInput {
  readonly clock: ClockKind;
  /** Of the life clock, all modes together. */
  readonly fit: PowerLawFit | NoPowerLawFit;
  readonly lives: LifeSummary;
  /** Share of the failures on the life clock that were patched, 0…1. */
  readonly patchedShare: number;
  /** Of one item each, integer minor units; null where nobody has said. */
  readonly costs: {
    readonly plannedMinor: number | null;
    readonly failureMinor: number | null;
    /** One item's part of a renewal of the whole group in one visit. */
    readonly groupPlannedMinor: number | null;
  };
  /** The task that renews by plan today, clock units above 0; nulls where there is none. */
  readonly current: { readonly interval: number | null; readonly task: string | null };
  readonly positions: number;
  /** Clock units a year and position, above 0: 365.25 on the calendar, mean hours a year on operating hours. */
  readonly unitsAYear: number;
  /** Whether the class is held as groups (assets of more than one item). */
  readonly isGroup: boolean;
  /** Age beyond which today's schedule hides what would happen; null where it hides nothing. */
  readonly maskedAge: number | null;
  /** A hidden function with the availability it is to have, its failures and their exposure (above 0); else null. */
  readonly hidden: {
    readonly requiredAvailability: number;
    readonly failures: number;
    readonly exposure: number;
  } | null;
}

const curvePoints = 60;
/** The band of the drawn curve takes the first of the draws, which fill the square evenly at any length. */
const curveDraws = 80;

/**
 * Prices schedules of one class against today's: today's interval, none at all, the best one as it can be
 * kept, and a longer one to try where the schedule hides what lies beyond it.
 *
 * Mostly patched failures are priced as minimal repair with periodic renewal, groups as block replacement,
 * all else as age replacement (Barlow & Hunter 1960). How sure: 400 draws from the asymptotic normal of
 * (ln β̂, ln η̂).
 */
export function priceSchedule(input: ScheduleInput): ScheduleFindings {
  const { fit, costs, lives, current, positions, hidden } = input;
  const inGroups = input.isGroup || costs.groupPlannedMinor !== null;
  const basis = fit.kind === 'fit' && drawsOf(fit) !== null ? basisOf(input, fit, inGroups) : null;
  const always = {
    basis,
    current: { interval: current.interval, task: current.task },
    positions,
    supportedAge: lives.supportedAge,
    failureFinding: hidden === null ? null : findFailures(hidden, input.clock),
  };
  if (fit.kind !== 'fit') return { kind: 'no-fit', reason: 'no-shape', ...always };
  const planned = (inGroups ? costs.groupPlannedMinor : null) ?? costs.plannedMinor ?? 0;
  const failure = costs.failureMinor ?? 0;
  if (!(planned > 0 && failure > 0)) {
    const missing = [
      ...(planned > 0 ? [] : ['planned' as const]),
      ...(failure > 0 ? [] : ['failure' as const]),
    ];
    return { kind: 'costs-missing', missing, ...always };
  }
  const priced =
    basis === null
      ? null
      : price({ ...input, basis, supportedAge: lives.supportedAge }, { planned, failure }, []);
  return priced === null
    ? { kind: 'no-fit', reason: 'out-of-range', ...always }
    : { ...priced.schedule, ...always };
}

function basisOf(input: ScheduleInput, fit: PowerLawFit, inGroups: boolean): PriceBasis {
  return {
    policy: input.patchedShare > 0.5 ? 'minimal-repair' : inGroups ? 'block-replacement' : 'age-replacement',
    unitsAYear: input.unitsAYear,
    fit: { shape: fit.shape, scale: fit.scale, covariance: { ...fit.covariance } },
    exposureByAge: input.lives.exposureByAge.map((stretch) => ({ ...stretch })),
  };
}

/**
 * Prices one more interval, at costs of one's own choice, on what the night's prices rest on: the same code and
 * the same draws, so that trying the night's own numbers gives the night's own answer to the digit.
 *
 * @param schedule of the night.
 * @param tried clock units, null for no planned renewal; costs in integer minor units above 0.
 * @returns null where no price comes out: no life shape, or one too uncertain or extreme.
 */
export function tryInterval(
  schedule: ScheduleFindings,
  tried: { interval: number | null; plannedMinor: number; failureMinor: number },
  clock: ClockKind,
): { schedule: PricedSchedule; change: Change } | null {
  const { basis, current, positions, supportedAge, failureFinding } = schedule;
  if (basis === null) return null;
  const input = { basis, clock, current, positions, supportedAge, maskedAge: null };
  const priced = price(input, { planned: tried.plannedMinor, failure: tried.failureMinor }, [tried.interval]);
  const change = priced?.changeTo(tried.interval) ?? null;
  if (priced === null || change === null) return null;
  return {
    schedule: { ...priced.schedule, basis, current, positions, supportedAge, failureFinding },
    change,
  };
}

interface Costs {
  readonly planned: number;
  readonly failure: number;
}

type Priced = Omit<PricedSchedule, 'basis' | 'current' | 'positions' | 'supportedAge' | 'failureFinding'>;

interface PriceInput {
  readonly basis: PriceBasis;
  readonly clock: ClockKind;
  readonly current: { readonly interval: number | null };
  readonly positions: number;
  readonly supportedAge: number | null;
  readonly maskedAge: number | null;
}

/**
 * Null where the fit is so uncertain or extreme that a price is no longer a whole number that can be told.
 *
 * @param besides intervals to price besides those the advice weighs.
 */
function price(
  { basis, clock, current, maskedAge, positions, supportedAge }: PriceInput,
  costs: Costs,
  besides: readonly (number | null)[],
): { schedule: Priced; changeTo: (interval: number | null) => Change | null } | null {
  const { fit, policy, unitsAYear } = basis;
  const draws = drawsOf(fit);
  if (draws === null) return null;
  const renewal = renewalPolicy(basis, costs);
  const exact = renewal(fit).bestInterval();
  const interval = exact === null ? null : keptInterval(exact, supportedAge, clock);
  const beyondData = exact !== null && exact > (supportedAge ?? 0);
  const trial = trialInterval(maskedAge, current.interval, clock);
  const beyond =
    exact !== null && beyondData && current.interval !== null && maskedAge !== null
      ? practicableInterval(exact, clock)
      : null;

  const question = { policy: renewal, currentInterval: current.interval, fit, draws };
  const weighed = [null, interval, trial, beyond].filter((one, index) => index === 0 || one !== null);
  const value = scheduleValue(question, [...weighed, ...besides.filter((one) => !weighed.includes(one))]);
  const perYear = unitsAYear * positions;
  const dearer = renewalPolicy(basis, { ...costs, failure: 2 * costs.failure })(fit);
  const changeTo = (one: number | null): Change | null => {
    const found = value.alternatives.find((alternative) => alternative.interval === one);
    if (found === undefined) return null;
    const dearerSaving = dearer.costRate(current.interval) - dearer.costRate(one);
    return {
      interval: one,
      ...moneyAYear(found, perYear),
      share: found.shareSaving,
      breakEvenFailureMinor: breakEven(costs.failure, found.saving, dearerSaving),
    };
  };
  const stop = changeTo(null)!;
  const reach = Math.max(curveReach(exact, basis, supportedAge), 1.5 * (current.interval ?? 0));
  const curve = costCurve(curveIntervals(Math.max(reach, ...besides.map((one) => 1.2 * (one ?? 0)))), {
    policy: renewal,
    fit,
    draws: draws.slice(0, curveDraws),
  });
  const result: Priced = {
    kind: 'priced',
    policy,
    costs: { plannedMinor: costs.planned, failureMinor: costs.failure },
    best: {
      exact,
      interval,
      beyondData,
      range: { low: value.bestIntervalRange.lower, high: value.bestIntervalRange.upper },
    },
    today: moneyAYear(value.today, perYear).costPerYear,
    changes: {
      best: interval === null ? null : changeTo(interval),
      stop,
      trial: trial === null ? null : changeTo(trial),
      bestBeyondData: beyond === null ? null : changeTo(beyond),
    },
    curve: curve.map((point) => ({
      interval: point.interval,
      cost: Math.round(point.costRate * perYear),
      low: Math.round(Math.min(point.lower, point.costRate) * perYear),
      high: Math.round(Math.max(point.upper, point.costRate) * perYear),
    })),
  };
  const tried = besides.map(changeTo);
  return isTellable(result, tried) ? { schedule: result, changeTo } : null;
}

function drawsOf(fit: UncertainWeibull): Weibull[] | null {
  try {
    return weibullDraws(fit);
  } catch (error) {
    if (error instanceof RangeError) return null;
    throw error;
  }
}

function renewalPolicy({ policy, exposureByAge }: PriceBasis, costs: Costs): RenewalPolicy {
  switch (policy) {
    case 'minimal-repair':
      return minimalRepairPolicy(costs, (life) => hazardAtWatchedAges(exposureByAge, life));
    case 'block-replacement':
      return blockReplacementPolicy(costs);
    case 'age-replacement':
      return ageReplacementPolicy(costs);
  }
}

/** The best interval as it can be kept, cut off at the longest one that the records support. */
function keptInterval(exact: number, supportedAge: number | null, clock: ClockKind): number | null {
  if (supportedAge === null) return null;
  const longest = practicableInterval(supportedAge, clock, 'down');
  return longest === null ? null : Math.min(practicableInterval(exact, clock), longest);
}

/** Far enough to show the best interval and where the curve levels out. */
function curveReach(exact: number | null, { fit }: PriceBasis, supportedAge: number | null): number {
  if (exact !== null) return 2 * exact;
  const meanLife = weibullMeanLife(fit);
  return 1.5 * (Number.isFinite(meanLife) ? meanLife : (supportedAge ?? fit.scale));
}

const curveIntervals = (reach: number): number[] =>
  Array.from({ length: curvePoints }, (_, index) => ((index + 1) / curvePoints) * reach);

function moneyAYear(priced: PricedInterval, perYear: number): Pick<Change, 'costPerYear' | 'savingPerYear'> {
  const money = (value: number, range: PricedInterval['costRange']) => ({
    value: wholeMoney(value * perYear),
    low: wholeMoney(range.lower * perYear),
    high: wholeMoney(range.upper * perYear),
  });
  return {
    costPerYear: money(priced.costRate, priced.costRange),
    savingPerYear: money(priced.saving, priced.savingRange),
  };
}

function wholeMoney(value: number): number {
  return Math.round(value) || 0;
}

/** Savings are linear in the cost of a failure: two of them give the cost at which there is none. */
function breakEven(failure: number, saving: number, savingAtTwice: number): number | null {
  const cost = Math.round(failure - (saving * failure) / (savingAtTwice - saving));
  return cost > 0 && Number.isSafeInteger(cost) ? cost : null;
}

/** Whether every number can be told: finite, and money exact to the minor unit. */
function isTellable({ best, today, changes, curve }: Priced, tried: readonly (Change | null)[]): boolean {
  const money = [
    today,
    ...[changes.best, changes.stop, changes.trial, changes.bestBeyondData, ...tried].flatMap((change) =>
      change === null ? [] : [change.costPerYear, change.savingPerYear],
    ),
    ...curve.map(({ cost, low, high }) => ({ value: cost, low, high })),
  ];
  const lengths = [best.exact, best.interval, ...curve.map(({ interval }) => interval)];
  return (
    money.every(({ value, low, high }) => [value, low, high].every(Number.isSafeInteger)) &&
    lengths.every((length) => length === null || (length > 0 && Number.isFinite(length)))
  );
}

function findFailures(
  { requiredAvailability, failures, exposure }: NonNullable<ScheduleInput['hidden']>,
  clock: ClockKind,
): FailureFinding {
  const meanTime = failures === 0 ? null : exposure / failures;
  const { low } = meanTimeInterval(failures, exposure);
  const interval = meanTime === null ? null : failureFindingInterval(requiredAvailability, meanTime);
  const cautiousInterval = failureFindingInterval(requiredAvailability, low);
  return {
    requiredAvailability,
    meanTime,
    meanTimeLow: low,
    interval,
    cautiousInterval,
    ruleOfThumb: meanTime === null ? null : approximateFailureFindingInterval(requiredAvailability, meanTime),
    practicable: practicableInterval(interval ?? cautiousInterval, clock, 'down'),
  };
}
