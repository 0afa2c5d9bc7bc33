import { z } from 'zod';
import { formatFixed, formatInterval, formatNoun, formatP, formatQuantity } from '~/format/number';
import type { Position } from '~/reliability/position';
import { compareTwoRates, type CountInExposure } from '~/reliability/two-rates';
import { watchedEvents } from '~/reliability/watched-events';
import { countPeriod } from './compare-periods';

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

/** What a change is for: fewer failures, or less planned work. */
export type Aim = 'prevent' | 'spare';

/** More frequent renewals are to prevent failures, rarer ones or none are to spare work; null stands for none. */
export function aimOf({ from, to }: { readonly from: number | null; readonly to: number | null }): Aim {
  return (to ?? Infinity) < (from ?? Infinity) ? 'prevent' : 'spare';
}

export interface FollowUpInput {
  readonly aim: Aim;
  /** Whether it is in force no more, since a later change took over. */
  readonly isOver: boolean;
  readonly against: FollowUp['against'];
  readonly base: FollowUpPeriod;
  readonly after: FollowUpPeriod;
  readonly costs: { readonly plannedMinor: number | null; readonly failureMinor: number | null };
  /** Clock units one position runs in a year, above 0. */
  readonly unitsAYear: number;
}

const confidence = 0.9;
/** Of the standard normal at 0.95, for the two-sided 90 % interval. */
const normalQuantile95 = 1.645;

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
 * One that is to prevent failures helped when there are clearly fewer, unless all together it clearly costs more;
 * made it worse when there are clearly more; and made no difference when the rates are the same. One that is to spare
 * planned work helped when all together it clearly costs less and made it worse when it clearly costs more; where the
 * costs are not given or do not tell, it made it worse when there are clearly more failures, and helped when there
 * are as many or fewer with less planned work. Until the interval of the ratio is clear of 1, or lies wholly
 * within 0.67 to 1.5, it is too early to say. The rule is Intervale's own.
 *
 * @returns null where one of the periods holds no running time.
 */
export function followUp(input: FollowUpInput): FollowUp | null {
  const { base, after, against } = input;
  if (!(base.exposure > 0 && after.exposure > 0)) return null;
  const { ratio, lower, upper, p } = compareTwoRates(countOf(after), countOf(base), confidence);
  const test = { ratio, low: lower, high: upper, p };
  const cost = costOf(input, test);
  const judged = judge(input, { rate: rateChange(test), money: costChange(cost) });
  const result = { word: judged.word, against, base, after, ...test, cost };
  return { ...result, sentence: sentenceFor(judged.meaning, result, input) };
}

const countOf = ({ failures, exposure }: FollowUpPeriod): CountInExposure => ({ failures, exposure });

type Test = Pick<FollowUp, 'ratio' | 'low' | 'high' | 'p'>;

interface Judgement {
  readonly word: FollowUpWord;
  /** The word as a sentence. */
  readonly meaning: string;
}

interface Changes {
  readonly rate: 'fewer' | 'more' | 'same' | 'unclear';
  /** Null where there are no costs, or where they do not tell yet. */
  readonly money: 'cheaper' | 'dearer' | null;
}

function judge(input: FollowUpInput, changes: Changes): Judgement {
  return input.aim === 'prevent' ? judgePrevention(input, changes) : judgeSparing(input, changes);
}

function judgePrevention(input: FollowUpInput, { rate, money }: Changes): Judgement {
  switch (rate) {
    case 'fewer':
      return money === 'dearer'
        ? { word: 'worse', meaning: 'It made it worse: fewer fail, but all together more is spent.' }
        : { word: 'helped', meaning: 'It helped: fewer fail.' };
    case 'more':
      return { word: 'worse', meaning: 'It made it worse: more fail.' };
    case 'same':
      return { word: 'no-difference', meaning: 'It made no difference: about as many fail.' };
    case 'unclear':
      return notYet(input);
  }
}

function judgeSparing(input: FollowUpInput, { rate, money }: Changes): Judgement {
  if (money === 'cheaper') return { word: 'helped', meaning: 'It helped: all together less is spent.' };
  if (money === 'dearer') return { word: 'worse', meaning: 'It made it worse: all together more is spent.' };
  if (rate === 'more') return { word: 'worse', meaning: 'It made it worse: more fail.' };
  if (rate === 'unclear') return notYet(input);
  const failing = rate === 'fewer' ? 'fewer fail' : 'about as many fail';
  return isLessWork(input)
    ? { word: 'helped', meaning: `It helped: less planned work, and ${failing}.` }
    : { word: 'no-difference', meaning: `It made no difference: as much planned work, and ${failing}.` };
}

function notYet({ isOver }: FollowUpInput): Judgement {
  const meaning = isOver ? 'It was not in force for long enough to say.' : 'Too early to say.';
  return { word: 'too-early', meaning };
}

const isLessWork = ({ base, after }: FollowUpInput): boolean =>
  after.plannedRenewals / after.exposure < base.plannedRenewals / base.exposure;

function rateChange({ low, high }: Test): Changes['rate'] {
  if (high !== null && high < 1) return 'fewer';
  if (low > 1) return 'more';
  return low >= sameFrom && high !== null && high <= sameTo ? 'same' : 'unclear';
}

function costChange(cost: FollowUp['cost']): Changes['money'] {
  if (cost === null) return null;
  if (cost.afterHigh !== null && cost.afterHigh < cost.base) return 'cheaper';
  return cost.afterLow > cost.base ? 'dearer' : null;
}

/**
 * Planned work as counted, failures at the base's rate times the ends of the ratio: the interval says how far the
 * failures' share could lie from the base's as counted (common practice, no source).
 */
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

function sentenceFor(meaning: string, result: Omit<FollowUp, 'sentence'>, input: FollowUpInput): string {
  const { base, after, ratio, low, high, p, against } = result;
  const counts =
    against === 'rest'
      ? `${inTime(after, input)} on trial, ${inTime(base, input)} in the rest of the class over the same time`
      : `${inTime(after, input)} since, ${inTime(base, input)} before`;
  const ends = formatInterval(low, high, (end) => formatFixed(end, 2));
  const numbers =
    ratio === null ? formatP(p) : `${formatFixed(ratio, 2)} times the rate (${ends}), ${formatP(p)}`;
  return `${meaning} ${counts}: ${numbers}.${untilClear(result, input)}`;
}

function inTime({ failures, exposure }: FollowUpPeriod, { unitsAYear }: FollowUpInput): string {
  const years = exposure / unitsAYear;
  return `${formatNoun(failures, 'failure')} in ${formatQuantity(Number(years.toPrecision(2)), 'item-year')}`;
}

const daysAMonth = 365.25 / 12;

/** How much longer until it would show that nothing changed, if nothing did. */
function untilClear(result: Omit<FollowUp, 'sentence'>, { isOver }: FollowUpInput): string {
  if (result.word !== 'too-early' || isOver) return '';
  const days = daysUntilClear(result);
  if (days === null) return '';
  if (days === Infinity) {
    return ' There were too few failures before for a difference ever to be ruled out; only a large one can show.';
  }
  const months = Math.max(1, Math.ceil(days / daysAMonth));
  if (months > 120) return ' If nothing changed, it would take more than 10 years to show.';
  const span = months > 24 ? formatQuantity(Math.ceil(months / 12), 'year') : formatQuantity(months, 'month');
  return ` If nothing changed, that would show in about ${span}.`;
}

/**
 * Days from now until the interval of a ratio of 1 lies within 0.67 to 1.5: the variance of ln ratio is about
 * 1/n₁ + 1/n₂ (normal approximation, from memory). The time before stays as it is; the rest of the class goes on
 * beside a trial, so that both counts grow.
 *
 * @returns Infinity where it never comes to that; null where nothing failed, so that nothing can be said.
 */
function daysUntilClear({ base, after, against }: Omit<FollowUp, 'sentence'>): number | null {
  const mostVariance = (Math.log(sameTo) / normalQuantile95) ** 2;
  const elapsed = after.to - after.from;
  const pace = after.exposure / elapsed;
  if (against === 'rest') {
    const failures = base.failures + after.failures;
    if (failures === 0) return null;
    const rate = failures / (base.exposure + after.exposure);
    const restPace = base.exposure / elapsed;
    return (1 / pace + 1 / restPace) / (rate * mostVariance) - elapsed;
  }
  const left = base.failures === 0 ? 0 : mostVariance - 1 / base.failures;
  if (!(left > 0)) return Infinity;
  return (1 / left) * (base.exposure / base.failures / pace) - elapsed;
}
