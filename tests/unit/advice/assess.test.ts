import { describe, expect, it } from 'vitest';
import { decideRun } from '~/advice/conclude';
import type { Conclusion } from '~/advice/conclusion';
import { dutyUsage } from '~/reliability/usage';
import { anEvidence, assessAlone } from '../../support/class-evidence';
import { aPosition, anEvent } from '../../support/position';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const codes = ({ cautions }: Conclusion) => cautions.map(({ code }) => code);
const cautionOf = (conclusion: Conclusion, code: string) =>
  conclusion.cautions.find((caution) => caution.code === code);

const wearing = simulateClass(seededRandom(7), { ...usualClass, shape: 3 });
const steady = simulateClass(seededRandom(11), { ...usualClass, shape: 1, scale: 300 });

describe('assessment of a class', () => {
  it('says in words that wearing items wear out, and how much older the failed ones were', () => {
    const conclusion = assessAlone(anEvidence(wearing));
    expect(conclusion.verdict).toBe('wear-out');
    expect(conclusion.headline.claim).toBe('Seals wear out.');
    expect(conclusion.headline.support).toMatch(
      /^Of \d+ failed seals, the failed one was older than [6-9]\d\u202f% of the others on average\.$/,
    );
    expect(conclusion.answers.age.short).toBe('Yes.');
  });

  it('says that memoryless items fail at a constant rate', () => {
    const conclusion = assessAlone(anEvidence(steady));
    expect(conclusion.verdict).toBe('memoryless');
    expect(conclusion.headline.claim).toBe('Seals fail at a constant rate, whatever their age.');
    expect(conclusion.answers.age.short).toBe('No.');
  });

  it('gives an item without a single failure a bound instead of a rate', () => {
    const conclusion = assessAlone(anEvidence([aPosition()]));
    expect(conclusion.verdict).toBe('undecided');
    expect(conclusion.headline.support).toContain(
      'No failure in 1\u202f000 days of running time of all seals together.',
    );
    // 2T/χ²(.95; 2) = 2·1000/5.9915, exact.
    expect(conclusion.headline.support).toContain(
      'One failure in fewer than 334 days of running time is ruled out.',
    );
    expect(codes(conclusion)).toEqual(['few-failures']);
  });

  it('does without any position', () => {
    const conclusion = assessAlone(anEvidence([], { now: 100 }));
    expect(conclusion.verdict).toBe('undecided');
    expect(conclusion.headline.support).toBe('No seal has been watched for a full day yet.');
  });

  it('says how many more failures would settle an undecided verdict', () => {
    const conclusion = assessAlone(anEvidence([aPosition({ events: [anEvent(300), anEvent(700)] })]));
    expect(conclusion.answers.age.sentence).toMatch(/About \d+ more failures would settle it\./);
  });

  it('keeps its head when all failures fall on one day', () => {
    const positions = Array.from({ length: 6 }, (_, index) =>
      aPosition({ id: `p${index}`, events: [anEvent(1000)] }),
    );
    const conclusion = assessAlone(anEvidence(positions));
    expect(conclusion.verdict).toBe('undecided');
    expect(conclusion.answers.age.sentence).toContain(
      'All 6 failures of known age came at the longest age reached',
    );
  });

  it('works on ages of a million hours', () => {
    const positions = wearing.map((position) => ({
      ...position,
      usage: { at: (day: number) => day * 1000 },
    }));
    const conclusion = assessAlone(anEvidence(positions, { clock: 'operating-hours' }));
    expect(conclusion.verdict).toBe('wear-out');
  });
});

describe('cautions', () => {
  it('warns that few failures are behind a verdict below 10 and not from 10 on', () => {
    const failing = (n: number) =>
      assessAlone(
        anEvidence([
          aPosition({ events: Array.from({ length: n }, (_, i) => anEvent(90 * (i + 1) + i * i)) }),
        ]),
      );
    expect(codes(failing(9))).toContain('few-failures');
    expect(codes(failing(10))).not.toContain('few-failures');
    expect(cautionOf(failing(9), 'few-failures')?.sentence).toContain('Only 9 failures');
  });

  it('says that a schedule masks what older items would do, and not when half the lives run on', () => {
    const kept = simulateClass(seededRandom(3), { ...usualClass, shape: 1, renewalAgeDays: 200 });
    const conclusion = assessAlone(anEvidence(kept));
    expect(cautionOf(conclusion, 'masked-by-schedule')?.sentence).toContain('Masked beyond 200 days');
    if (conclusion.verdict === 'memoryless') {
      expect(conclusion.headline.claim).toBe(
        'Seals fail at a constant rate up to 200 days, whatever their age.',
      );
    }
    expect(codes(assessAlone(anEvidence(steady)))).not.toContain('masked-by-schedule');
  });

  it('counts the positions whose item has no known fitting date', () => {
    const known = Array.from({ length: 6 }, (_, i) => aPosition({ id: `k${i}` }));
    const unknown = Array.from({ length: 2 }, (_, i) => aPosition({ id: `u${i}`, inServiceAt: -500 }));
    const caution = cautionOf(assessAlone(anEvidence([...known, ...unknown])), 'ages-unknown');
    expect(caution?.sentence).toContain('2 of 8 positions (25\u202f%)');
    expect(codes(assessAlone(anEvidence(known)))).not.toContain('ages-unknown');
  });

  it('says when operating hours are assumed', () => {
    const positions = steady.map((position) => ({ ...position, usage: dutyUsage(10) }));
    const assumed = assessAlone(
      anEvidence(positions, { clock: 'operating-hours', positionsWithAssumedClock: positions.length }),
    );
    expect(cautionOf(assumed, 'clock-assumed')?.sentence).toContain('all 30 positions');
  });

  it('notices that logging may have stopped', () => {
    const busy = Array.from({ length: 12 }, (_, i) => anEvent(20 * (i + 1)));
    expect(codes(assessAlone(anEvidence([aPosition({ watchTo: 260, events: busy })])))).not.toContain(
      'logging-gap',
    );
    expect(codes(assessAlone(anEvidence([aPosition({ watchTo: 600, events: busy })])))).toContain(
      'logging-gap',
    );
  });

  it('always stands before the advice where law or people are concerned, worst first', () => {
    const conclusion = assessAlone(anEvidence(wearing, { statutory: true, endangersPeople: true }));
    expect(codes(conclusion).slice(0, 2)).toEqual(['endangers-people', 'statutory']);
    expect(cautionOf(conclusion, 'statutory')?.action).toMatch(/local code/);
    expect(cautionOf(conclusion, 'endangers-people')?.action).toMatch(/licensed practitioner/);
  });
});

describe('the run', () => {
  it('lets a class pass only if its test holds up among all classes looked at', () => {
    const alone = decideRun([{ pWearOut: 0.04, pLaplace: 0.2, pWearOutOfModes: [] }]);
    expect(alone[0]).toEqual({ wearOutPasses: true, laplacePasses: false, modesWearOutPass: [] });
    const among = decideRun([
      { pWearOut: 0.04, pLaplace: null, pWearOutOfModes: [] },
      ...Array.from({ length: 9 }, () => ({ pWearOut: 0.5, pLaplace: null, pWearOutOfModes: [] })),
    ]);
    expect(among[0]!.wearOutPasses).toBe(false);
  });

  it('gives a class without a test no pass, and does not count it', () => {
    const decisions = decideRun([
      { pWearOut: null, pLaplace: null, pWearOutOfModes: [] },
      { pWearOut: 0.09, pLaplace: null, pWearOutOfModes: [] },
    ]);
    expect(decisions.map(({ wearOutPasses }) => wearOutPasses)).toEqual([false, true]);
  });
});
