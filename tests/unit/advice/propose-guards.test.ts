import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sureEnough } from '~/advice/decide-action';
import { summariseLives } from '~/advice/life-summary';
import { priceSchedule } from '~/advice/price-schedule';
import { changingActions, proposalSchema } from '~/advice/proposal';
import type { ProposalFacts } from '~/advice/proposal-facts';
import { propose } from '~/advice/propose';
import { scheduleAnswer } from '~/advice/schedule-answer';
import type { ScheduleFindings } from '~/advice/schedule-findings';
import { trends } from '~/advice/trend';
import { verdicts } from '~/advice/verdict';
import { lifeHistories } from '~/reliability/life-histories';
import { fitPowerLaw } from '~/reliability/power-law';
import { change, facts, marks, priced, withoutCosts } from '../../support/proposal-facts';
import { seededRandom } from '../../support/seeded-random';
import { simulateClass, usualClass } from '../../support/simulate-class';

const length = fc.integer({ min: 7, max: 4000 });
const maybe = <T>(value: fc.Arbitrary<T>) => fc.option(value, { nil: null });
const anyShare = fc.double({ min: 0, max: 1, noNaN: true });
const anyValue = fc.integer({ min: -1_000_000, max: 1_000_000 });

const anySchedule: fc.Arbitrary<ScheduleFindings> = fc.oneof(
  maybe(length).map(withoutCosts),
  fc
    .record({
      today: maybe(length),
      exact: maybe(length),
      supported: maybe(length),
      masked: length,
      share: anyShare,
      value: anyValue,
    })
    .map(({ today, exact, supported, masked, share, value }) => {
      const best = exact === null || supported === null ? null : Math.min(exact, supported);
      return priced({
        today,
        exact,
        best,
        supportedAge: supported,
        beyondData: exact !== null && exact > (supported ?? 0),
        share,
        value,
        changes: { trial: today === null ? null : change(Math.max(today * 1.2, masked * 1.5), value, share) },
      });
    }),
);

const anyFacts: fc.Arbitrary<ProposalFacts> = fc
  .record({
    statutory: fc.boolean(),
    endangersPeople: fc.boolean(),
    verdict: fc.constantFrom(...verdicts),
    trend: fc.constantFrom(...trends),
    schedule: anySchedule,
    maskedAge: maybe(length),
    more: maybe(fc.nat(40)),
    modesDiffer: fc.boolean(),
    badPositions: fc.array(fc.constantFrom('A-1', 'B-2'), { maxLength: 2 }),
  })
  .map(({ statutory, endangersPeople, more, ...rest }) =>
    facts({
      ...rest,
      marks: { ...marks, statutory, endangersPeople },
      failuresToSettle: more === null ? null : { more },
    }),
  );

describe('for any facts', () => {
  it('the guards hold, and every number and sentence is whole', () => {
    fc.assert(
      fc.property(anyFacts, (given) => {
        const proposal = proposalSchema.parse(propose(given));
        const changes = changingActions.includes(proposal.action);
        const { statutory, endangersPeople } = given.marks;
        expect(proposal.action === 'evidence-only').toBe(statutory || endangersPeople);
        if (!changes) expect(proposal.to).toEqual(proposal.from);
        if (changes && proposal.share !== null) expect(proposal.share).toBeGreaterThanOrEqual(sureEnough);
        if (changes && proposal.action !== 'trial' && proposal.to.interval !== null) {
          expect(proposal.to.interval).toBeLessThanOrEqual(given.schedule.supportedAge ?? 0);
        }
        if (proposal.action === 'trial') expect(given.maskedAge).not.toBeNull();
        if (given.maskedAge !== null) expect(['stop', 'lengthen']).not.toContain(proposal.action);
        const { title, worth, why, whatIsMissing, whatWouldMakeItWrong } = proposal.words;
        const answer = scheduleAnswer(given);
        for (const text of [
          title,
          worth ?? 'None.',
          ...why,
          ...whatIsMissing,
          ...whatWouldMakeItWrong,
          ...Object.values(answer),
        ]) {
          expect(text).toMatch(/^[A-Z\d].*\.$/s);
          expect(text).not.toMatch(/NaN|undefined|null|Infinity|not known| {2}/);
        }
        expect(why.length).toBeGreaterThan(0);
        expect(whatWouldMakeItWrong.length > 0).toBe(changes);
      }),
      { numRuns: 2000 },
    );
  });
});

describe('from simulated records to a proposal', () => {
  const proposalOf = (shape: number, today: number | null, failureMinor: number, seed = 7) => {
    const renewalAgeDays = today ?? Infinity;
    const setting = { ...usualClass, shape, positions: 80, watchedDays: 1461, renewalAgeDays };
    const { histories } = lifeHistories(simulateClass(seededRandom(seed), setting));
    const schedule = priceSchedule({
      clock: 'calendar-days',
      fit: fitPowerLaw(histories),
      lives: summariseLives(histories),
      patchedShare: 0,
      costs: { plannedMinor: 18_000, failureMinor, groupPlannedMinor: null },
      current: { interval: today, task: null },
      positions: 80,
      unitsAYear: 365.25,
      isGroup: false,
      maskedAge: today,
      hidden: null,
    });
    const verdict = shape > 1 ? 'wear-out' : 'memoryless';
    return { schedule, proposal: propose(facts({ verdict, schedule, maskedAge: today })) };
  };

  it('starts a schedule where failures are dear, none where they are cheap', () => {
    const { proposal, schedule } = proposalOf(3, null, 145_000);
    expect(proposal.action).toBe('start');
    expect(proposal.to.interval).toBeLessThanOrEqual(schedule.supportedAge ?? 0);
    expect(proposal.savingPerYearMinor?.low).toBeGreaterThan(0);
    expect(proposalOf(1.8, null, 17_000).proposal).toMatchObject({ action: 'keep', to: { interval: null } });
  });

  it('shortens what is too long and tries what a schedule hides', () => {
    expect(proposalOf(3, 800, 290_000).proposal.action).toBe('shorten');
    const trial = proposalOf(1, 365, 30_000).proposal;
    expect(trial).toMatchObject({
      action: 'trial',
      to: { interval: 18 * 30.4375 },
      part: { positions: 20, of: 80 },
    });
  });
});
