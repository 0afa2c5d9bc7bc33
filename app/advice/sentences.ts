import { withArticle } from '~/format/article';
import { formatClock, formatCount, formatFixed, formatNoun, formatPercent } from '~/format/number';
import { capitalised } from './capitalised';
import { modesDiffer } from './cautions/mixed-modes';
import type { ClassFacts, ClassMarks } from './class-facts';
import { clockUnit } from './clock-unit';
import type { Conclusion } from './conclusion';
import type { Findings } from './findings';
import { maskedAge } from './masking';
import { fewestFailuresForVerdict } from './verdict';

type Headline = Conclusion['headline'];
type Answer = Conclusion['answers']['age'];

/** What the class page opens with: a plain claim, and the evidence in one sentence. */
export function headlineOf(facts: ClassFacts): Headline {
  return { claim: claimOf(facts), support: supportOf(facts) };
}

function claimOf({ verdict, marks, findings }: ClassFacts): string {
  const items = capitalised(marks.itemPlural);
  switch (verdict) {
    case 'wear-out':
      return `${items} wear out.`;
    case 'early-life':
      return `${items} fail young.`;
    case 'memoryless': {
      const masked = maskedAge(findings);
      const until = masked === null ? '' : ` up to ${formatClock(masked, clockUnit(findings.clock))}`;
      return `${items} fail at a constant rate${until}, whatever their age.`;
    }
    case 'undecided':
      return `Nobody can say yet whether ${marks.itemPlural} wear out.`;
  }
}

function supportOf(facts: ClassFacts): string {
  const { verdict, findings, marks } = facts;
  const { meanYoungerPeers, marks: rankMarks } = findings.ageRank;
  if (findings.rate.overall.failures === 0) return noFailureSentence(findings, marks);
  const settling = verdict === 'undecided' ? ` ${settlingSentence(findings)}` : '';
  if (meanYoungerPeers === null) {
    return `${formatNoun(findings.life.fit.failures, 'failure')} of known age ${findings.life.fit.failures === 1 ? 'is' : 'are'} on record.${settling}`;
  }
  const failed =
    rankMarks.length === 1
      ? `The one ${marks.itemSingular} that failed was`
      : `Of ${formatCount(rankMarks.length)} failed ${marks.itemPlural}, the failed one was`;
  const average = rankMarks.length === 1 ? '' : ' on average';
  return `${failed} older than ${formatPercent(meanYoungerPeers)} of the others${average}.${settling}`;
}

function noFailureSentence(findings: Findings, marks: ClassMarks): string {
  const { exposure, meanTimeInterval } = findings.rate.overall;
  if (exposure === 0) return `No ${marks.itemSingular} has been watched for a full day yet.`;
  const unit = clockUnit(findings.clock);
  const bound =
    meanTimeInterval.low === null
      ? ''
      : ` One failure in fewer than ${formatClock(meanTimeInterval.low, unit)} of running time is ruled out.`;
  return `No failure in ${formatClock(exposure, unit)} of running time of all ${marks.itemPlural} together.${bound}`;
}

/** What it would take to settle an undecided verdict. */
export function settlingSentence({ life }: Findings): string {
  const { failuresToSettle, fit } = life;
  if (failuresToSettle === null)
    return 'No item of known age was under watch, so more failures alone would not settle it.';
  const { more } = failuresToSettle;
  if (more > 0) {
    return `About ${formatNoun(more, 'more failure')} would settle it.`;
  }
  if (fit.failures < fewestFailuresForVerdict) {
    return `At least ${formatNoun(fewestFailuresForVerdict - fit.failures, 'more failure')} would be needed.`;
  }
  return 'The number of failures would do in most cases; here the answer happens to lie near the line.';
}

/** The answer to the first question: does the class fail more often than it used to? */
export function trendAnswer({ trend, findings, marks }: ClassFacts): Answer {
  const { laplace } = findings.trend;
  const group = `The ${marks.itemPlural} as a group`;
  if (laplace === null) {
    return { short: 'Nothing to go by.', sentence: `No failure of ${marks.itemPlural} is on record.` };
  }
  switch (trend) {
    case 'rising':
      return { short: 'Yes.', sentence: `${group} fail more often than they used to.` };
    case 'falling':
      return { short: 'Less often.', sentence: `${group} fail less often than they used to.` };
    case 'level':
      return { short: 'No sign of it.', sentence: `${group} fail about as often as they used to.` };
    case 'unclear':
      return {
        short: 'Unclear.',
        sentence: `${formatNoun(laplace.failures, 'failure')} cannot tell a steady rate from one that changes by half or more.`,
      };
  }
}

/** The answer to the second question: do the old ones go first? */
export function ageAnswer(facts: ClassFacts): Answer {
  const { verdict, findings, marks } = facts;
  const { fit } = findings.life;
  switch (verdict) {
    case 'wear-out':
      return {
        short: 'Yes.',
        sentence: `The older ${withArticle(marks.itemSingular)} is, the likelier it is to fail in the next week.`,
      };
    case 'memoryless':
      return {
        short: 'No.',
        sentence: `An old ${marks.itemSingular} is no likelier to fail than a new one; replacing a working one prevents nothing.`,
      };
    case 'early-life':
      return {
        short: 'The other way round.',
        sentence: `New ${marks.itemPlural} fail most. Look at parts, fitting and start-up before anything else.`,
      };
    case 'undecided':
      return { short: 'Cannot be said yet.', sentence: undecidedBecause(fit, marks, findings) };
  }
}

function undecidedBecause(fit: Findings['life']['fit'], marks: ClassMarks, findings: Findings): string {
  if (fit.kind === 'cannot-be-estimated') return `${fit.reason} ${settlingSentence(findings)}`;
  if (fit.failures < fewestFailuresForVerdict) {
    return `${formatNoun(fit.failures, 'failure')} of known age ${fit.failures === 1 ? 'says' : 'say'} nothing either way. ${settlingSentence(findings)}`;
  }
  const { low, high } = fit.shapeInterval;
  const reach = `shape ${low === null ? 'near 0' : formatFixed(low, 2)} to ${high === null ? 'without bound' : formatFixed(high, 2)}`;
  if (low !== null && low > 1) {
    return `Old ${marks.itemPlural} seem to go first, but among so many classes looked at it may be chance. ${settlingSentence(findings)}`;
  }
  return `The ${formatNoun(fit.failures, 'failure')} fit a constant rate and fit clear wear-out as well (${reach}). ${settlingSentence(findings)}`;
}

/** The two questions read together: what their answers mean side by side. */
export function togetherSentence({ verdict, trend, marks, modeVerdicts }: ClassFacts): string {
  if (modesDiffer(modeVerdicts)) {
    return 'The failure modes are unlike: what they say together holds for none of them.';
  }
  if ((marks.statutory || marks.endangersPeople) && trend !== 'rising' && trend !== 'falling') {
    return 'What follows from this for its maintenance is for the local code and a licensed practitioner to say.';
  }
  if (trend === 'falling')
    return 'The class fails less often than it did. Find out what improved before changing anything.';
  if (trend === 'rising' && verdict === 'wear-out') {
    return `Age matters, and the class as a whole gets worse too: a schedule can help, and so can a look at what the ${marks.itemPlural} sit in.`;
  }
  if (trend === 'rising') {
    return `The class fails more often, and not because its ${marks.itemPlural} are old. Something else is changing: what they sit in, water, voltage, use, a new supplier. Replacing ${marks.itemPlural} on a schedule will not help.`;
  }
  if (verdict === 'wear-out') return `Age matters and the class is steady: this is what a schedule is for.`;
  if (verdict === 'memoryless')
    return `Neither age nor the calendar matters: a schedule has nothing to prevent.`;
  if (verdict === 'early-life')
    return `Every replacement starts the risky time anew: a schedule would make it worse.`;
  return 'Not enough is known for a change of schedule.';
}
