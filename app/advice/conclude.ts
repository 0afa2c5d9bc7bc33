import { benjaminiHochberg } from '~/reliability/benjamini-hochberg';
import { cautionsFor } from './cautions';
import { badPositions } from './cautions/few-bad-positions';
import { modesDiffer } from './cautions/mixed-modes';
import type { ClassFacts, JudgementContext } from './class-facts';
import type { Conclusion } from './conclusion';
import type { Findings } from './findings';
import { judgeModes, modeTestsOf } from './judge-modes';
import { maskedAge } from './masking';
import type { ProposalFacts } from './proposal-facts';
import { propose } from './propose';
import { scheduleAnswer } from './schedule-answer';
import { ageAnswer, headlineOf, togetherSentence, trendAnswer } from './sentences';
import type { ShapeFit } from './shape-fit';
import { judgeTrend } from './trend';
import { judgeVerdict, type Verdict } from './verdict';

/** Which of a class's tests hold up among all classes of the run. */
export interface RunDecisions {
  readonly wearOutPasses: boolean;
  readonly laplacePasses: boolean;
  /** Of each failure mode of the findings, in their order. */
  readonly modesWearOutPass: readonly boolean[];
}

/** The p-values of one class that compete with those of the others; null where there is no test. */
export interface RunTests {
  readonly pWearOut: number | null;
  readonly pLaplace: number | null;
  readonly pWearOutOfModes: readonly (number | null)[];
}

/** Among the classes a run calls wear-out, or calls a trend, at most this share is to be wrong. */
const falseDiscoveryLevel = 0.1;

/** The tests of one class that go into the run's false-discovery control. */
export function runTestsOf(findings: Findings): RunTests {
  return {
    pWearOut: findings.life.memorylessTest?.pWearOut ?? null,
    pLaplace: findings.trend.laplace?.p ?? null,
    pWearOutOfModes: modeTestsOf(findings.modes),
  };
}

/**
 * Decides for every class of a run which of its tests hold up, by Benjamini–Hochberg at 10 % over the
 * classes that have the test. Failure modes are a family of their own, so that a class with many of them
 * does not move the verdicts of others. Source: Benjamini & Hochberg 1995.
 */
export function decideRun(tests: readonly RunTests[]): RunDecisions[] {
  const wearOut = passing(tests.map(({ pWearOut }) => pWearOut));
  const laplace = passing(tests.map(({ pLaplace }) => pLaplace));
  const modes = passing(tests.flatMap(({ pWearOutOfModes }) => pWearOutOfModes));
  let taken = 0;
  return tests.map(({ pWearOutOfModes }, index) => ({
    wearOutPasses: wearOut[index] ?? false,
    laplacePasses: laplace[index] ?? false,
    modesWearOutPass: modes.slice(taken, (taken += pWearOutOfModes.length)),
  }));
}

function passing(pValues: readonly (number | null)[]): boolean[] {
  const passes = benjaminiHochberg(
    pValues.filter((p) => p !== null),
    falseDiscoveryLevel,
  ).values();
  return pValues.map((p) => (p === null ? false : (passes.next().value ?? false)));
}

/** Judged as if every test held up among all classes: most are not touched by what the others show. */
export function allHold({ pWearOutOfModes }: RunTests): RunDecisions {
  return { wearOutPasses: true, laplacePasses: true, modesWearOutPass: pWearOutOfModes.map(() => true) };
}

/** Judges one class: verdict, trend, words, cautions and proposal from its findings and the run's decisions. */
export function conclude(
  findings: Findings,
  { marks, currency }: JudgementContext,
  decisions: RunDecisions,
): Conclusion {
  const verdict = judgeVerdict({
    failures: findings.life.fit.failures,
    shapeInterval: closed(findings.life.fit),
    wearOutPasses: decisions.wearOutPasses,
  });
  const trend = judgeTrend({
    slopeInterval: closed(findings.trend.slope),
    laplacePasses: decisions.laplacePasses,
  });
  const modeVerdicts = judgeModes(findings.modes, decisions.modesWearOutPass);
  const facts = { marks, findings, verdict, trend, modeVerdicts, pricing: pricingOf(findings, verdict) };
  const proposalFacts = proposalFactsOf(facts, currency);
  const proposal = propose(proposalFacts);
  return {
    verdict,
    trend,
    headline: headlineOf(facts),
    answers: {
      trend: trendAnswer(facts),
      age: ageAnswer(facts),
      schedule: scheduleAnswer(proposalFacts),
    },
    together: togetherSentence(facts),
    cautions: cautionsFor(facts),
    modes: modeVerdicts.map((mode) => ({ modeId: mode.modeId, verdict: mode.verdict })),
    proposal,
  };
}

function proposalFactsOf(facts: ClassFacts, currency: string): ProposalFacts {
  const { marks, findings, verdict, trend, modeVerdicts } = facts;
  return {
    marks,
    clock: findings.clock,
    currency,
    verdict,
    trend,
    schedule: findings.schedule,
    maskedAge: maskedAge(findings),
    failuresToSettle: findings.life.failuresToSettle,
    modesDiffer: modesDiffer(modeVerdicts),
    badPositions: badPositions(findings.scatter),
  };
}

/** The cheapest interval only matters where the items wear out. */
function pricingOf({ schedule }: Findings, verdict: Verdict): ClassFacts['pricing'] {
  const isPriced = schedule.kind === 'priced' && verdict === 'wear-out';
  return {
    missing: schedule.kind === 'costs-missing' ? schedule.missing : [],
    bestInterval: isPriced ? schedule.best.exact : null,
    supportedAge: schedule.supportedAge,
  };
}

/** An interval that the data leave open at an end reaches to that end of the possible. */
function closed(fit: ShapeFit): { low: number; high: number } | null {
  if (fit.kind === 'cannot-be-estimated') return null;
  return { low: fit.shapeInterval.low ?? 0, high: fit.shapeInterval.high ?? Infinity };
}
