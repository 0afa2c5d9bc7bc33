import { formatNoun } from '~/format/number';
import { formatMoney } from '~/format/money';
import { capitalised } from './capitalised';
import type { Decision } from './decide-action';
import { ageWords } from './practicable-interval';
import { changingActions } from './proposal';
import type { ProposalFacts } from './proposal-facts';
import { formatRoughMoney } from './rough-money';

/** What would make a proposed change wrong, worst first; empty where no change is proposed. */
export function whatWouldMakeItWrong(facts: ProposalFacts, decision: Decision): string[] {
  if (!changingActions.includes(decision.action)) return [];
  const { schedule, marks, clock } = facts;
  const sentences = [...costDoubts(facts, decision)];
  if (decision.action === 'start' || decision.action === 'shorten') {
    sentences.push(
      `It is wrong if planned renewals bring faults of their own, or if the ${marks.itemPlural} fitted from now on are of another make or another use than those on record.`,
    );
  } else {
    const seen = schedule.supportedAge;
    const where =
      decision.action === 'lengthen' || seen === null
        ? ''
        : ` beyond the ${ageWords(seen, clock)} seen so far`;
    sentences.push(
      `It is wrong if failures were put right without being logged, or if ${marks.itemPlural} begin to fail faster${where}.`,
    );
  }
  return sentences;
}

function costDoubts({ schedule, currency }: ProposalFacts, { action, weighed }: Decision): string[] {
  if (schedule.kind !== 'priced' || weighed === null) return [];
  const money = (amount: number) => formatMoney(amount, currency);
  const { failureMinor, plannedMinor } = schedule.costs;
  const even = weighed.breakEvenFailureMinor;
  const moreRenewals = action === 'start' || action === 'shorten';
  if (moreRenewals) {
    const limit =
      even !== null && even < failureMinor
        ? ` Below ${formatRoughMoney(even, currency)} a failure it no longer pays.`
        : '';
    return [
      `It is wrong if the ${money(failureMinor)} for a failure includes closures or damage that would have happened anyway, or if a planned renewal costs more than the ${money(plannedMinor)} entered.${limit}`,
    ];
  }
  const limit =
    even !== null && even > failureMinor
      ? ` Above ${formatRoughMoney(even, currency)} a failure it no longer pays.`
      : '';
  return [
    `It is wrong if the ${money(failureMinor)} for a failure leaves out closures, damage or complaints that a failure brings.${limit}`,
  ];
}

/** What would have to be known to say more. */
export function whatIsMissing(facts: ProposalFacts, { reason }: Decision): string[] {
  const { schedule, failuresToSettle, marks } = facts;
  const sentences: string[] = [];
  if (reason === 'undecided') {
    if (failuresToSettle === null) {
      sentences.push(`When the ${marks.itemPlural} in place were fitted: without it no age is known.`);
    } else if (failuresToSettle.more > 0) {
      sentences.push(
        `About ${formatNoun(failuresToSettle.more, 'more failure')} of known age would settle whether ${marks.itemPlural} wear out.`,
      );
    } else {
      sentences.push('More failures of known age: the answer lies near the line.');
    }
  }
  if (reason === 'falling') sentences.push('What was changed when the failures became fewer.');
  if (reason === 'modes-differ')
    sentences.push('A failure mode on every failure, so that each mode can be judged.');
  if (schedule.kind === 'costs-missing') {
    const names = {
      planned: 'what one planned renewal costs',
      failure: 'what one failure costs, with its consequences',
    };
    sentences.push(`${capitalised(schedule.missing.map((cost) => names[cost]).join(', and '))}.`);
  }
  return sentences;
}
