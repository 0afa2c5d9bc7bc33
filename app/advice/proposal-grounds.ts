import { capitalised } from './capitalised';
import type { Decision } from './decide-action';
import { ageWords, everyWords, intervalWords } from './practicable-interval';
import type { ProposalFacts } from './proposal-facts';
import { formatRoughMoney } from './rough-money';

/** Why it is proposed, a sentence a reason, the weightiest first. */
export function whyProposed(facts: ProposalFacts, decision: Decision): string[] {
  return [...groundsOf(facts, decision), ...besides(facts, decision)];
}

function groundsOf(facts: ProposalFacts, decision: Decision): string[] {
  const { marks, schedule, clock, verdict } = facts;
  const items = marks.itemPlural;
  const today = schedule.current.interval;
  const prices = priceSentence(facts, decision);
  switch (decision.reason) {
    case 'marked':
      return [deferral(facts), ...evidenceByCost(facts)];
    case 'rising-not-by-age':
      return [
        `The class fails more often than it did, and the age of the ${items} does not explain it. Something else is changing: what they sit in, water, voltage, use, a new supplier.`,
        `Renewing ${items} on a schedule would not help against that.`,
      ];
    case 'falling':
      return [
        'The class fails less often than it did. Whatever improved would be mixed up with the effect of a change made now.',
      ];
    case 'modes-differ':
      return [
        'The failure modes differ: one verdict for all of them together would fit none. No interval is advised from it.',
      ];
    case 'undecided':
      return [`Nobody can say yet whether ${items} wear out; a change of schedule now would be a guess.`];
    case 'early-life':
      return [`New ${items} fail most: look at parts, fitting and start-up.`, ...scheduleMakesItWorse(facts)];
    case 'bad-positions':
      return [
        `${items} fail at a constant rate, whatever their age, but not everywhere alike: ${facts.badPositions.join(', ')} fail far more often than the rest.`,
      ].map(capitalised);
    case 'nothing-to-prevent':
      return [
        `A working ${marks.itemSingular} that is renewed is no less likely to fail afterwards: there is nothing for a schedule to prevent.`,
        ...hiding(facts, decision),
        ...prices,
      ];
    case 'costs-missing':
      return [
        `${capitalised(items)} wear out, so a schedule can prevent failures. Whether it pays depends on costs that nobody has entered yet.`,
      ];
    case 'not-priceable':
      return ['The fitted curve is too uncertain for any price to be put on it.'];
    case 'few-survivors':
      return [
        `${capitalised(items)} wear out, but fewer than 5 were seen to reach an age at which an interval could lie.`,
      ];
    case 'schedule-pays':
    case 'shorter-pays':
    case 'longer-pays':
      return [
        `${capitalised(items)} wear out: the older one is, the likelier it is to fail.`,
        ...hiding(facts, decision),
        ...prices,
      ];
    case 'cheap-to-fail':
      return [
        `${capitalised(items)} wear out, but a failure costs too little more than a planned renewal for any schedule to pay.`,
        ...hiding(facts, decision),
        ...prices,
      ];
    case 'about-right':
      return [
        `${capitalised(items)} wear out, and today’s ${intervalWords(today ?? 0, clock)} is within what can be told apart from the cheapest interval.`,
      ];
    case 'too-close':
      return verdict === 'memoryless'
        ? [
            `${capitalised(items)} show no sign of wearing out, but mild wear is not ruled out, and with these costs it would count.`,
          ]
        : [
            `${capitalised(items)} wear out, but the records leave room for the change to cost more than it saves.`,
          ];
    case 'beyond-data':
      return [
        today === null
          ? 'Within the ages that the records can speak of, no interval is cheaper for sure than running to failure.'
          : 'A longer interval may be cheaper, but the records say nothing about ages beyond today’s.',
      ];
    case 'past-what-was-seen':
      return [
        `Today’s ${intervalWords(today ?? 0, clock)} already reaches beyond the ages seen so far: keep it, and let the records grow.`,
      ];
  }
}

/** What is true beside the rule that decided. */
function besides({ trend, verdict, marks, badPositions }: ProposalFacts, { reason }: Decision): string[] {
  const sentences: string[] = [];
  if (trend === 'rising' && verdict === 'wear-out' && reason !== 'marked') {
    sentences.push(
      `The class as a whole gets worse too: look at what the ${marks.itemPlural} sit in as well.`,
    );
  }
  if (badPositions.length > 0 && reason !== 'bad-positions') {
    sentences.push(`Some fail far more often than the rest: ${badPositions.join(', ')}.`);
  }
  return sentences;
}

/** Who decides where the law or people's safety is at stake. */
export function deferral({ marks }: ProposalFacts): string {
  if (!marks.statutory) {
    return `A failure of ${marks.itemPlural} can hurt people: the licensed practitioner and the local code decide on intervals and methods, not cost.`;
  }
  return `Maintenance of ${marks.itemPlural} is set by law or code: follow the local code, and take this evidence to the responsible licensed practitioner.`;
}

function evidenceByCost({ schedule, verdict, clock, currency }: ProposalFacts): string[] {
  if (schedule.kind !== 'priced' || verdict !== 'wear-out' || schedule.changes.best === null) return [];
  const { interval, costPerYear } = schedule.changes.best;
  return [
    `By cost alone, renewing ${everyWords(interval ?? 0, clock)} would come to ${formatRoughMoney(costPerYear.value, currency, 3)} a year, today’s way to ${formatRoughMoney(schedule.today.value, currency, 3)}. That decides nothing here.`,
  ];
}

function scheduleMakesItWorse({ schedule, maskedAge }: ProposalFacts): string[] {
  if (schedule.current.interval === null) return [];
  const advice =
    maskedAge === null
      ? 'once the cause is found, stop renewing working ones.'
      : 'once the cause is found, try a longer interval on a part of the class.';
  return [`The schedule makes it worse, as every renewal starts the risky time anew: ${advice}`];
}

function hiding({ maskedAge, clock, marks }: ProposalFacts, { action }: Decision): string[] {
  if (action !== 'trial' || maskedAge === null) return [];
  return [
    `Today’s schedule hides how ${marks.itemPlural} would last beyond ${ageWords(maskedAge, clock)}; a trial on a part of the class shows it at little risk.`,
  ];
}

function priceSentence({ schedule, currency, clock }: ProposalFacts, { weighed }: Decision): string[] {
  if (schedule.kind !== 'priced') return [];
  const money = (amount: number) => formatRoughMoney(amount, currency, 3);
  const today = schedule.current.interval;
  const withoutRenewals = schedule.policy === 'minimal-repair' ? 'patching for ever' : 'running to failure';
  const parts = [
    ...(today === null ? [] : [`today’s ${intervalWords(today, clock)} ${money(schedule.today.value)}`]),
    ...(weighed === null || weighed.interval === null
      ? []
      : [`${intervalWords(weighed.interval, clock)} ${money(weighed.costPerYear.value)}`]),
    `${withoutRenewals} ${money(schedule.changes.stop.costPerYear.value)}`,
  ];
  return [`Cost a year for the whole class: ${parts.join(', ')}.`];
}
