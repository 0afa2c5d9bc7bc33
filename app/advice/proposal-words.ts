import { formatCount, formatNoun, formatPercent } from '~/format/number';
import { sureEnough, type Decision } from './decide-action';
import { changeWords, everyWords, intervalWords } from './practicable-interval';
import type { Proposal } from './proposal';
import type { ProposalFacts } from './proposal-facts';
import { whatIsMissing, whatWouldMakeItWrong } from './proposal-doubts';
import { whyProposed } from './proposal-grounds';
import { formatRoughMoney } from './rough-money';

/** A proposal in plain words. */
export function proposalWords(
  facts: ProposalFacts,
  decision: Decision,
  part: Proposal['part'],
): Proposal['words'] {
  return {
    title: titleOf(facts, decision, part),
    worth: worthOf(facts, decision),
    why: whyProposed(facts, decision),
    whatWouldMakeItWrong: whatWouldMakeItWrong(facts, decision),
    whatIsMissing: whatIsMissing(facts, decision),
  };
}

function titleOf(facts: ProposalFacts, { action, reason, to }: Decision, part: Proposal['part']): string {
  const { schedule, clock, marks } = facts;
  const from = schedule.current.interval;
  switch (action) {
    case 'start':
      return `Start renewing ${to === null ? 'by plan' : everyWords(to, clock)}.`;
    case 'shorten':
    case 'lengthen':
      return `${action === 'shorten' ? 'Shorten' : 'Lengthen'} ${changeWords(from ?? 0, to ?? 0, clock)}.`;
    case 'stop':
      return `Stop renewing ${everyWords(from ?? 0, clock)}.`;
    case 'trial':
      return `Try ${intervalWords(to ?? 0, clock)} on ${formatCount(part?.positions ?? 0)} of ${formatNoun(part?.of ?? 0, marks.itemSingular, marks.itemPlural)}.`;
    case 'keep':
      return keepTitle(facts, reason);
    case 'gather':
      return gatherTitle(facts, reason);
    case 'look-for-cause':
      return reason === 'bad-positions'
        ? `Look for the cause at ${facts.badPositions.join(', ')}.`
        : 'Look for the cause.';
    case 'evidence-only':
      return marks.statutory
        ? 'Evidence only: the local code decides.'
        : 'Evidence only: the licensed practitioner decides.';
  }
}

function keepTitle({ schedule, clock }: ProposalFacts, reason: Decision['reason']): string {
  if (reason === 'falling') return 'Change nothing yet: ask what improved.';
  const today = schedule.current.interval;
  const closeness = reason === 'too-close' ? ': too close to call' : '';
  if (today !== null) return `Keep ${intervalWords(today, clock)}${closeness}.`;
  return reason === 'too-close' ? 'Change nothing: too close to call.' : 'Run to failure, and hold spares.';
}

function gatherTitle({ failuresToSettle }: ProposalFacts, reason: Decision['reason']): string {
  switch (reason) {
    case 'costs-missing':
      return 'Enter the costs.';
    case 'modes-differ':
      return 'Judge the failure modes apart.';
    case 'few-survivors':
      return 'Wait until more items have grown old.';
    default: {
      const more = failuresToSettle?.more ?? 0;
      return more > 0 ? `Gather ${formatNoun(more, 'more failure')}.` : 'Gather more failures of known age.';
    }
  }
}

function worthOf({ currency }: ProposalFacts, { action, weighed, reason }: Decision): string | null {
  if (weighed === null || reason === 'about-right') return null;
  const { share, savingPerYear } = weighed;
  const money = (amount: number) => formatRoughMoney(amount, currency);
  const range = `${money(savingPerYear.low)} to ${money(savingPerYear.high)}`;
  if (action === 'keep') {
    return `The change that was weighed saves money in only ${formatPercent(share)} of what the records leave possible; under ${formatPercent(sureEnough)} nothing is proposed.`;
  }
  const subject = action === 'trial' ? 'If it holds for the whole class, it saves' : 'Saves';
  return `${subject} about ${money(savingPerYear.value)} a year (${range} in four cases of five). It saves money in ${formatPercent(share)} of what the records leave possible.`;
}
