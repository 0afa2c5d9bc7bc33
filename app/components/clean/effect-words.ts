import type { ClassStanding } from '~/models/correction-effect.server';

type Judged = Pick<ClassStanding, 'verdict' | 'trend' | 'proposal'>;

/** What a correction does to what is said of a class, in a sentence or two: the verdict first. */
export function effectSentence(before: Judged, after: Judged): string {
  const sameTrend = before.trend === after.trend;
  const sameProposal = before.proposal === after.proposal;
  if (before.verdict === after.verdict && sameTrend && sameProposal) {
    return 'Verdict, trend and proposal stay as they are.';
  }
  const verdict =
    before.verdict === after.verdict
      ? `The verdict stays ${after.verdict}.`
      : `The verdict changes from ${before.verdict} to ${after.verdict}.`;
  const trend = sameTrend ? '' : ` The trend changes from ${before.trend} to ${after.trend}.`;
  return verdict + trend + (sameProposal ? '' : ' Another thing is proposed.');
}
