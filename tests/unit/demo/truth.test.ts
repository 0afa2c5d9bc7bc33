import { describe, expect, it } from 'vitest';
import { classSpecs } from '../../../fixtures/demo/classes';
import { generateDemo } from '../../../fixtures/demo/generate';
import type { DemoRecords } from '../../../fixtures/demo/records';
import { truthOf, truths, type ClassTruth } from '../../../fixtures/demo/truth';
import { evidenceOf } from './evidence-of';
import { advanceAlarmState } from '~/advice/advance-alarm-state';
import { computeFindings } from '~/advice/compute-findings';
import { conclude, decideRun, runTestsOf } from '~/advice/conclude';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';
import { lifeHistories } from '~/reliability/life-histories';
import { fitPowerLaw } from '~/reliability/power-law';

interface Assessed {
  truth: ClassTruth;
  findings: Findings;
  conclusion: Conclusion;
}

/** One night over all classes, as of yesterday. */
function assess(demo: DemoRecords): Assessed[] {
  const findings = classSpecs.map((spec) => {
    const evidence = evidenceOf(spec, demo);
    const positions = [...evidence.positions, ...evidence.rateOnlyPositions];
    return computeFindings(evidence, advanceAlarmState(null, positions));
  });
  const decisions = decideRun(findings.map(runTestsOf));
  return classSpecs.map((spec, index) => ({
    truth: truthOf(spec.name),
    findings: findings[index]!,
    conclusion: conclude(findings[index]!, { marks: spec, currency: 'GBP' }, decisions[index]!),
  }));
}

const demo = generateDemo();
const night = assess(demo);
const assessed = (className: string) => night.find(({ truth }) => truth.className === className)!;
const single = truths.filter(({ className }) => className !== 'Corridor lamp');

describe('the verdicts on the demo', () => {
  it.each(truths)('$className: $expectedVerdict', ({ className, expectedVerdict }) => {
    expect(assessed(className).conclusion.verdict).toBe(expectedVerdict);
  });

  it.each(truths.filter(({ expectedTrend }) => expectedTrend))(
    '$className has a trend: $expectedTrend',
    ({ className, expectedTrend }) => {
      expect(assessed(className).conclusion.trend).toBe(expectedTrend);
    },
  );

  it.each(truths)(
    '$className raises the cautions it should, and no other',
    ({ className, expectedCautions }) => {
      const raised = assessed(className).conclusion.cautions.map(({ code }) => code);
      expect(raised.sort()).toEqual([...expectedCautions].sort());
    },
  );

  it.each(truths.filter(({ expectedProposal }) => expectedProposal))(
    '$className is advised to: $expectedProposal',
    ({ className, expectedProposal }) => {
      const { proposal } = assessed(className).conclusion;
      if (expectedProposal === 'run-to-failure') {
        expect(proposal).toMatchObject({ action: 'keep', from: { interval: null }, to: { interval: null } });
      } else {
        expect(proposal.action).toBe(expectedProposal);
      }
    },
  );

  it.each(single.filter(({ hazards, truthKind }) => hazards.length === 1 && truthKind !== 'few-failures'))(
    '$className: the interval of the shape holds the truth',
    ({ className, hazards }) => {
      const { fit } = assessed(className).findings.life;
      if (fit.kind !== 'fit') throw new Error(fit.reason);
      const truth = hazards[0]!.shape;
      expect(fit.shapeInterval.low).toBeLessThan(truth);
      expect(fit.shapeInterval.high).toBeGreaterThan(truth);
    },
  );

  it('tells the two modes of the ignition electrode apart', () => {
    const spec = classSpecs.find(({ name }) => name === 'Boiler ignition electrode')!;
    const { positions } = evidenceOf(spec, demo);
    const interval = (mode: string) => {
      const fit = fitPowerLaw(lifeHistories(positions, { mode }).histories);
      if (fit.kind !== 'fit') throw new Error(fit.reason.code);
      return fit.interval;
    };
    expect(interval('Tip burned away').low).toBeGreaterThan(2);
    expect(interval('Insulator cracked').low).toBeLessThan(1);
    expect(interval('Insulator cracked').high).toBeGreaterThan(1);
    expect(interval('Insulator cracked').high).toBeLessThan(1.5);
  });

  it.each([11, 12, 13])(
    'do not hang on the seed where the truth is plain: seed %i',
    { timeout: 30_000 },
    (seed) => {
      const isPlain = ({ truthKind }: ClassTruth) => truthKind === 'wears' || truthKind === 'early-life';
      const misjudged = assess(generateDemo(seed)).filter(
        ({ truth, conclusion }) => isPlain(truth) && conclusion.verdict !== truth.expectedVerdict,
      );
      expect(misjudged.map(({ truth }) => truth.className)).toEqual([]);
    },
  );
});
