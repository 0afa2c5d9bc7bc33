import { capitalised } from './capitalised';
import { decideAction } from './decide-action';
import { ageWords, everyWords, intervalWords } from './practicable-interval';
import { deferral } from './proposal-grounds';
import type { ProposalFacts } from './proposal-facts';
import { formatRoughMoney } from './rough-money';

export interface ScheduleAnswer {
  readonly short: string;
  readonly sentence: string;
}

/** The answer to the third question: does a schedule pay? */
export function scheduleAnswer(facts: ProposalFacts): ScheduleAnswer {
  const { schedule, marks, clock, currency } = facts;
  const { action, reason, weighed } = decideAction(facts);
  const today = schedule.current.interval;
  const money = (amount: number) => formatRoughMoney(amount, currency);
  const saving = weighed === null ? '' : ` and saves about ${money(weighed.savingPerYear.value)} a year`;
  const to = weighed?.interval ?? null;
  switch (reason) {
    case 'marked':
      return { short: 'Not for cost to decide.', sentence: deferral(facts) };
    case 'rising-not-by-age':
      return {
        short: 'No.',
        sentence:
          'What makes the class fail more often is not the age of its items; a schedule would not touch it.',
      };
    case 'falling':
      return {
        short: 'Wait.',
        sentence: 'The class is getting better; find out why before pricing a change.',
      };
    case 'modes-differ':
      return {
        short: 'Not for all modes together.',
        sentence: 'The failure modes differ; judge each on its own.',
      };
    case 'undecided':
      return {
        short: 'Cannot be said yet.',
        sentence: `A schedule pays only where age matters, and that is not settled for ${marks.itemPlural}.`,
      };
    case 'early-life':
      return {
        short: 'No, it would make it worse.',
        sentence: `New ${marks.itemPlural} fail most, and every planned renewal fits a new one.`,
      };
    case 'bad-positions':
    case 'nothing-to-prevent':
      if (action === 'trial') {
        return {
          short: 'No sign of it.',
          sentence: `Up to ${ageWords(facts.maskedAge ?? 0, clock)} age does not matter; a longer interval on a part of the class would show what comes after.`,
        };
      }
      return {
        short: 'No.',
        sentence:
          action === 'stop'
            ? `A working ${marks.itemSingular} is as good as a new one: stopping brings no more failures${saving}.`
            : `A working ${marks.itemSingular} is as good as a new one, so there is nothing to prevent.`,
      };
    case 'costs-missing':
      return {
        short: 'Cannot be said without costs.',
        sentence: 'Enter what a planned renewal and a failure cost, and every interval can be priced.',
      };
    case 'not-priceable':
      return {
        short: 'Cannot be said yet.',
        sentence: 'The fitted curve is too uncertain to put a price on.',
      };
    case 'few-survivors':
      return {
        short: 'Cannot be said yet.',
        sentence: `Too few ${marks.itemPlural} have been seen to grow old enough.`,
      };
    case 'schedule-pays':
      return {
        short: 'Yes.',
        sentence: `Renewing ${everyWords(to ?? 0, clock)} prevents failures${saving}.`,
      };
    case 'shorter-pays':
      return {
        short: 'Yes, and a shorter one pays more.',
        sentence: `${capitalised(intervalWords(to ?? 0, clock))} instead of ${intervalWords(today ?? 0, clock)} prevents more failures than it costs${saving}.`,
      };
    case 'longer-pays':
      return {
        short: 'Yes, and a longer one may pay more.',
        sentence: `${capitalised(intervalWords(to ?? 0, clock))} instead of ${intervalWords(today ?? 0, clock)} spares more renewals than it costs in failures${saving}.`,
      };
    case 'cheap-to-fail':
      return {
        short: 'No: failing is cheap enough.',
        sentence: `${capitalised(marks.itemPlural)} wear out, but a failure costs too little more than a planned renewal.`,
      };
    case 'about-right':
      return {
        short: 'Yes, and today’s is about right.',
        sentence: `The cheapest interval cannot be told from today’s ${intervalWords(today ?? 0, clock)}.`,
      };
    case 'too-close':
      return {
        short: 'Too close to call.',
        sentence: 'What the records leave open decides whether a change would save money or cost it.',
      };
    case 'beyond-data':
      return {
        short: 'Not within what was seen.',
        sentence: 'The cheapest interval lies beyond the ages that the records can speak of.',
      };
    case 'past-what-was-seen':
      return {
        short: 'Cannot be said yet.',
        sentence: 'Today’s interval already reaches beyond the ages seen so far.',
      };
  }
}
