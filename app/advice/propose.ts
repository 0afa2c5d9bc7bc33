import { decideAction, type Decision } from './decide-action';
import { ageWords } from './practicable-interval';
import { changingActions, type Proposal } from './proposal';
import type { ProposalFacts } from './proposal-facts';
import { proposalWords } from './proposal-words';

/** One in four takes part in a trial (common practice, no source). */
const trialShare = 0.25;

/**
 * What to do about a class, as data and in plain words: from what to what, worth how much, how sure, why,
 * and what would make it wrong. Pure; the rules are those of {@link decideAction}.
 */
export function propose(facts: ProposalFacts): Proposal {
  const decision = decideAction(facts);
  const { schedule } = facts;
  const changes = changingActions.includes(decision.action);
  const part =
    decision.action === 'trial'
      ? { positions: Math.ceil(trialShare * schedule.positions), of: schedule.positions }
      : null;
  return {
    action: decision.action,
    reason: decision.reason,
    from: { interval: schedule.current.interval },
    to: { interval: decision.to },
    savingPerYearMinor: changes && decision.weighed !== null ? { ...decision.weighed.savingPerYear } : null,
    share: decision.weighed?.share ?? null,
    part,
    beyondData: beyondDataOf(facts, decision),
    words: proposalWords(facts, decision, part),
  };
}

/** Only where the money is what decides: for all else the best interval is beside the point. */
function beyondDataOf(
  { schedule, verdict, clock, marks }: ProposalFacts,
  decision: Decision,
): Proposal['beyondData'] {
  if (schedule.kind !== 'priced' || verdict !== 'wear-out' || decision.action === 'evidence-only')
    return null;
  const { best, supportedAge } = schedule;
  if (best.exact === null || !best.beyondData) return null;
  const reached =
    supportedAge === null
      ? `Fewer than 5 ${marks.itemPlural} of known age were watched`
      : `Only up to about ${ageWords(supportedAge, clock)} have at least 5 ${marks.itemPlural} been seen to last`;
  const sentence = `By the fitted curve the cheapest interval would be about ${ageWords(best.exact, clock)}. ${reached}; what lies beyond is guesswork, and no interval beyond it is proposed for the whole class.`;
  return { bestInterval: best.exact, supportedAge, sentence };
}
