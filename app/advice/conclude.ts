import { benjaminiHochberg } from '~/reliability/benjamini-hochberg';
import { cautionsFor } from './cautions';
import type { ClassMarks } from './class-facts';
import type { Conclusion } from './conclusion';
import type { Findings } from './findings';
import { ageAnswer, headlineOf, togetherSentence, trendAnswer } from './sentences';
import { judgeTrend } from './trend';
import { judgeVerdict } from './verdict';

/** Which of a class's tests hold up among all classes of the run. */
export interface RunDecisions {
  readonly wearOutPasses: boolean;
  readonly laplacePasses: boolean;
}

/** The p-values of one class that compete with those of the others; null where there is no test. */
export interface RunTests {
  readonly pWearOut: number | null;
  readonly pLaplace: number | null;
}

/** Among the classes a run calls wear-out, or calls a trend, at most this share is to be wrong. */
const falseDiscoveryLevel = 0.1;

/** The tests of one class that go into the run's false-discovery control. */
export function runTestsOf(findings: Findings): RunTests {
  return {
    pWearOut: findings.life.memorylessTest?.pWearOut ?? null,
    pLaplace: findings.trend.laplace?.p ?? null,
  };
}

/**
 * Decides for every class of a run which of its tests hold up, by Benjamini–Hochberg at 10 % over the
 * classes that have the test. Source: Benjamini & Hochberg 1995.
 */
export function decideRun(tests: readonly RunTests[]): RunDecisions[] {
  const wearOut = passing(tests.map(({ pWearOut }) => pWearOut));
  const laplace = passing(tests.map(({ pLaplace }) => pLaplace));
  return tests.map((_, index) => ({
    wearOutPasses: wearOut[index] ?? false,
    laplacePasses: laplace[index] ?? false,
  }));
}

function passing(pValues: readonly (number | null)[]): boolean[] {
  const passes = benjaminiHochberg(
    pValues.filter((p) => p !== null),
    falseDiscoveryLevel,
  ).values();
  return pValues.map((p) => (p === null ? false : (passes.next().value ?? false)));
}

/** Judges one class: verdict, trend, words and cautions from its findings and the run's decisions. */
export function conclude(findings: Findings, marks: ClassMarks, decisions: RunDecisions): Conclusion {
  const verdict = judgeVerdict({
    failures: findings.life.fit.failures,
    shapeInterval: closed(findings.life.fit),
    wearOutPasses: decisions.wearOutPasses,
  });
  const trend = judgeTrend({
    slopeInterval: closed(findings.trend.slope),
    laplacePasses: decisions.laplacePasses,
  });
  const facts = { marks, findings, verdict, trend };
  return {
    verdict,
    trend,
    headline: headlineOf(facts),
    answers: { trend: trendAnswer(facts), age: ageAnswer(facts) },
    together: togetherSentence(facts),
    cautions: cautionsFor(facts),
  };
}

/** An interval that the data leave open at an end reaches to that end of the possible. */
function closed(fit: Findings['life']['fit']): { low: number; high: number } | null {
  if (fit.kind === 'cannot-be-estimated') return null;
  return { low: fit.shapeInterval.low ?? 0, high: fit.shapeInterval.high ?? Infinity };
}
