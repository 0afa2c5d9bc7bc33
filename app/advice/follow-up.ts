import { z } from 'zod';
import { formatFixed, formatInterval, formatNoun, formatP, formatQuantity } from '~/format/number';
import type { Position } from '~/reliability/position';
import { compareTwoRates, type CountInExposure } from '~/reliability/two-rates';
import { watchedEvents } from '~/reliability/watched-events';
import { countPeriod } from './compare-periods';
import type { Action } from './proposal';

/** What became of a change once it was in effect. */
export const followUpWords = ['too-early', 'helped', 'no-difference', 'worse'] as const;
export type FollowUpWord = (typeof followUpWords)[number];

const periodSchema = z.object({
  /** Calendar days on the day count, `to` left out. */
  from: z.number(),
  to: z.number(),
  failures: z.number().int(),
  plannedRenewals: z.number().int(),
  /** Clock units of all positions together. */
  exposure: z.number(),
});
export type FollowUpPeriod = z.infer<typeof periodSchema>;

export const followUpSchema = z.object({
  word: z.enum(followUpWords),
  /** Against the time before, or, for a trial, against the rest of the class over the same time. */
  against: z.enum(['before', 'rest']),
  base: periodSchema,
  after: periodSchema,
  /** Failure rate after over that of the base, with its exact 90 % interval; null without a failure in the base. */
  ratio: z.number().nullable(),
  low: z.number(),
  high: z.number().nullable(),
  p: z.number(),
  /** Integer minor units a year and position; null where a cost is not given. */
  cost: z
    .object({ base: z.number(), after: z.number(), afterLow: z.number(), afterHigh: z.number().nullable() })
    .nullable(),
  sentence: z.string(),
});
export type FollowUp = z.infer<typeof followUpSchema>;

export interface FollowUpInput {
  readonly action: Extract<Action, 'start' | 'shorten' | 'lengthen' | 'stop' | 'trial'>;
  readonly against: FollowUp['against'];
  readonly base: FollowUpPeriod;
  readonly after: FollowUpPeriod;
  readonly costs: { readonly plannedMinor: number | null; readonly failureMinor: number | null };
  /** Clock units one position runs in a year, above 0. */
  readonly unitsAYear: number;
}

const confidence = 0.9;

/**
 * Rates whose ratio lies within these ends are called the same: the width that the trend's word "level" and the
 * verdict "memoryless" are held to as well (common practice, no source for the figure).
 */
const sameFrom = 1 / 1.5;
const sameTo = 1.5;

/** Failures, planned renewals and running time of positions within `[from, to)`, calendar days. */
export function followUpPeriod(positions: readonly Position[], from: number, to: number): FollowUpPeriod {
  const plannedRenewals = positions
    .flatMap(watchedEvents)
    .filter(({ kind, at }) => kind === 'planned-renewal' && at >= from && at < to).length;
  return { from, to, plannedRenewals, ...countPeriod(positions, from, to) };
}

/**
 * What a change did to the failures, by the exact conditional test of two Poisson rates (Przyborowski & Wilenski
 * 1940), and to the cost. It knows nothing of what else changed at the same time.
 *
 * A change that is to prevent failures (start, shorten) helped when there are clearly fewer, unless all
 * together it clearly costs more. One that is to spare planned work (stop, lengthen, trial) helped when all
 * together it clearly costs less, or, where no costs are given, when failures did not become more. Until the interval of
 * the ratio is clear of 1, or lies wholly within 0.67 to 1.5, it is too early to say. The rule is Intervale's own.
 *
 * @returns null where one of the periods holds no running time.
 */
export function followUp(input: FollowUpInput): FollowUp | null {
  const { base, after, against } = input;
  if (!(base.exposure > 0 && after.exposure > 0)) return null;
  const { ratio, lower, upper, p } = compareTwoRates(countOf(after), countOf(base), confidence);
  const test = { ratio, low: lower, high: upper, p };
  const cost = costOf(input, test);
  const word = wordFor(input, test, cost);
  const result = { word, against, base, after, ...test, cost };
  return { ...result, sentence: sentenceFor(result, input) };
}

const countOf = ({ failures, exposure }: FollowUpPeriod): CountInExposure => ({ failures, exposure });

type Test = Pick<FollowUp, 'ratio' | 'low' | 'high' | 'p'>;

function wordFor({ action }: FollowUpInput, test: Test, cost: FollowUp['cost']): FollowUpWord {
  const rate = rateChange(test);
  const money = costChange(cost);
  if (action === 'start' || action === 'shorten') {
    if (rate === 'fewer') return money === 'dearer' ? 'worse' : 'helped';
    if (rate === 'more') return 'worse';
    return rate === 'same' ? 'no-difference' : 'too-early';
  }
  if (money === 'cheaper') return 'helped';
  if (money === 'dearer') return 'worse';
  if (rate === 'more') return money === null ? 'worse' : 'no-difference';
  if (rate === 'same' || rate === 'fewer') return money === null ? 'helped' : 'no-difference';
  return 'too-early';
}

function rateChange({ low, high }: Test): 'fewer' | 'more' | 'same' | 'unclear' {
  if (high !== null && high < 1) return 'fewer';
  if (low > 1) return 'more';
  return low >= sameFrom && high !== null && high <= sameTo ? 'same' : 'unclear';
}

/** Null where there are no costs or where they do not tell yet. */
function costChange(cost: FollowUp['cost']): 'cheaper' | 'dearer' | null {
  if (cost === null) return null;
  if (cost.afterHigh !== null && cost.afterHigh < cost.base) return 'cheaper';
  return cost.afterLow > cost.base ? 'dearer' : null;
}

/** Planned work as counted, failures at the base's rate times the ends of the ratio. */
function costOf(input: FollowUpInput, { low, high }: Test): FollowUp['cost'] {
  const { plannedMinor, failureMinor } = input.costs;
  if (plannedMinor === null || failureMinor === null) return null;
  const { base, after, unitsAYear } = input;
  const aYear = (count: number, { exposure }: FollowUpPeriod) => (count / exposure) * unitsAYear;
  const planned = plannedMinor * aYear(after.plannedRenewals, after);
  const failuresBefore = failureMinor * aYear(base.failures, base);
  return {
    base: plannedMinor * aYear(base.plannedRenewals, base) + failuresBefore,
    after: planned + failureMinor * aYear(after.failures, after),
    afterLow: planned + low * failuresBefore,
    afterHigh: high === null ? null : planned + high * failuresBefore,
  };
}

function sentenceFor(result: Omit<FollowUp, 'sentence'>, input: FollowUpInput): string {
  const { word, base, after, ratio, low, high, p, against } = result;
  const what = against === 'rest' ? 'in the rest of the class over the same time' : 'before';
  const counts = `${inTime(after, input)} since, ${inTime(base, input)} ${what}`;
  const ends = formatInterval(low, high, (end) => formatFixed(end, 2));
  const numbers =
    ratio === null ? formatP(p) : `${formatFixed(ratio, 2)} times the rate (${ends}), ${formatP(p)}`;
  return `${meaning(word, input)} ${counts}: ${numbers}.${untilClear(result, input)}`;
}

function inTime({ failures, exposure }: FollowUpPeriod, { unitsAYear }: FollowUpInput): string {
  const years = exposure / unitsAYear;
  return `${formatNoun(failures, 'failure')} in ${formatQuantity(Number(years.toPrecision(2)), 'item-year')}`;
}

function meaning(word: FollowUpWord, { action }: FollowUpInput): string {
  const spares = action !== 'start' && action !== 'shorten';
  switch (word) {
    case 'too-early':
      return 'Too early to say.';
    case 'helped':
      return spares ? 'It helped: less is spent, all together.' : 'It helped: fewer fail.';
    case 'no-difference':
      return spares ? 'It made no difference that shows.' : 'It made no difference: as many fail.';
    case 'worse':
      return spares ? 'It made it worse: all together more is spent or more fail.' : 'It made it worse.';
  }
}

/**
 * How many more failures it takes at today's rate until equal rates would show as equal: the variance of
 * ln ratio is about 1/n₁ + 1/n₂ (normal approximation, from memory).
 */
function untilClear(
  { word, base, after }: Omit<FollowUp, 'sentence'>,
  { unitsAYear }: FollowUpInput,
): string {
  if (word !== 'too-early') return '';
  const needed = 1 / ((Math.log(sameTo) / 1.645) ** 2 - 1 / base.failures);
  if (!(needed > 0 && Number.isFinite(needed))) {
    return ' There were too few failures before for a difference ever to be ruled out; only a large one can show.';
  }
  const rate = base.failures / base.exposure;
  const pace = after.exposure / (after.to - after.from);
  const months = ((needed / rate - after.exposure) / pace / 365.25) * 12;
  if (!(months > 0 && unitsAYear > 0)) return '';
  return ` If nothing changed, that would show in about ${formatQuantity(Math.max(1, Math.ceil(months)), 'month')}.`;
}
