import { describe, expect, it } from 'vitest';
import { proposalSchema, type Proposal } from '~/advice/proposal';
import type { ProposalFacts } from '~/advice/proposal-facts';
import { propose } from '~/advice/propose';
import { scheduleAnswer } from '~/advice/schedule-answer';
import type { ScheduleFindings } from '~/advice/schedule-findings';
import { change, facts, marks, month, priced, withoutCosts } from '../../support/proposal-facts';

function proposalFor(differences: Partial<ProposalFacts> = {}): Proposal {
  return proposalSchema.parse(propose(facts(differences)));
}

describe('what can hurt somebody', () => {
  it('is evidence only, whatever the money says, and defers to code and licensed practice', () => {
    const statutory = proposalFor({ marks: { ...marks, statutory: true } });
    expect(statutory).toMatchObject({
      action: 'evidence-only',
      to: { interval: 365 },
      savingPerYearMinor: null,
    });
    expect(statutory.words.why[0]).toContain('local code');
    expect(statutory.words.why[0]).toContain('licensed practitioner');
    expect(statutory.words.why[1]).toContain('That decides nothing here.');
    const dangerous = proposalFor({
      marks: { ...marks, endangersPeople: true },
      trend: 'rising',
      verdict: 'memoryless',
    });
    expect(dangerous).toMatchObject({
      action: 'evidence-only',
      from: { interval: 365 },
      to: { interval: 365 },
    });
    expect(dangerous.words.title).toBe('Evidence only: the licensed practitioner decides.');
    expect(scheduleAnswer(facts({ marks: { ...marks, statutory: true } })).short).toBe(
      'Not for cost to decide.',
    );
  });
});

describe('what age does not explain', () => {
  it('needs a cause where the class gets worse', () => {
    for (const verdict of ['memoryless', 'early-life', 'undecided'] as const) {
      expect(proposalFor({ verdict, trend: 'rising' })).toMatchObject({
        action: 'look-for-cause',
        reason: 'rising-not-by-age',
      });
    }
    const both = proposalFor({ trend: 'rising' });
    expect(both.action).toBe('shorten');
    expect(both.words.why.at(-1)).toContain('gets worse too');
  });

  it('needs a question where the class gets better', () => {
    const proposal = proposalFor({ trend: 'falling' });
    expect(proposal).toMatchObject({ action: 'keep', reason: 'falling' });
    expect(proposal.words.title).toBe('Change nothing yet: ask what improved.');
  });

  it('is looked for in parts and fitting where items fail young, and the schedule makes it worse', () => {
    const without = proposalFor({ verdict: 'early-life', schedule: priced({ today: null }) });
    expect(without.action).toBe('look-for-cause');
    expect(without.words.why.join(' ')).toContain('parts, fitting and start-up');
    expect(without.words.why.join(' ')).not.toContain('schedule');
    const withOne = proposalFor({ verdict: 'early-life' });
    expect(withOne.action).toBe('look-for-cause');
    expect(withOne.words.why.join(' ')).toContain('stop renewing working ones');
    const masked = proposalFor({ verdict: 'early-life', maskedAge: 360 });
    expect(masked.words.why.join(' ')).toContain('try a longer interval on a part of the class');
  });

  it('is looked for at the bad positions where the rest is memoryless', () => {
    const badPositions = ['FEN-EF-07'];
    const proposal = proposalFor({ verdict: 'memoryless', schedule: priced({ today: null }), badPositions });
    expect(proposal).toMatchObject({ action: 'look-for-cause', reason: 'bad-positions' });
    expect(proposal.words.title).toBe('Look for the cause at FEN-EF-07.');
    expect(proposalFor({ badPositions }).words.why.at(-1)).toContain('FEN-EF-07');
  });
});

describe('what is not known', () => {
  it('is gathered where the verdict is open, with the number of failures it would take', () => {
    const proposal = proposalFor({ verdict: 'undecided' });
    expect(proposal).toMatchObject({ action: 'gather', reason: 'undecided', to: { interval: 365 } });
    expect(proposal.words.title).toBe('Gather 7 more failures.');
    expect(proposal.words.whatIsMissing[0]).toContain('7 more failures');
    expect(proposalFor({ verdict: 'undecided', failuresToSettle: null }).words.whatIsMissing[0]).toContain(
      'fitted',
    );
  });

  it('is asked for where costs are missing, and no interval is advised', () => {
    const proposal = proposalFor({ schedule: withoutCosts(365) });
    expect(proposal).toMatchObject({ action: 'gather', reason: 'costs-missing', share: null });
    expect(proposal.words.whatIsMissing).toEqual([
      'What one planned renewal costs, and what one failure costs, with its consequences.',
    ]);
    expect(scheduleAnswer(facts({ schedule: withoutCosts(null) })).short).toBe(
      'Cannot be said without costs.',
    );
  });

  it('is judged by mode where modes differ', () => {
    expect(proposalFor({ modesDiffer: true })).toMatchObject({ action: 'gather', reason: 'modes-differ' });
  });

  it('cannot be advised on where fewer than 5 items grew old or no price comes out', () => {
    const none = priced({ best: null, supportedAge: null, beyondData: true });
    expect(proposalFor({ schedule: none })).toMatchObject({ action: 'gather', reason: 'few-survivors' });
    const wild: ScheduleFindings = { ...withoutCosts(365), kind: 'no-fit', reason: 'out-of-range' };
    expect(proposalFor({ schedule: wild })).toMatchObject({ action: 'gather', reason: 'not-priceable' });
  });
});

describe('memoryless items', () => {
  it('need no schedule: stop it, with or without costs, unless it hides what lies beyond', () => {
    const stop = proposalFor({ verdict: 'memoryless', schedule: priced({ today: 730.5 }) });
    expect(stop).toMatchObject({ action: 'stop', to: { interval: null }, share: 0.94 });
    expect(stop.words.title).toBe('Stop renewing every 24 months.');
    expect(stop.savingPerYearMinor?.value).toBe(250_000);
    expect(proposalFor({ verdict: 'memoryless', schedule: withoutCosts(730) })).toMatchObject({
      action: 'stop',
      savingPerYearMinor: null,
    });
  });

  it('get a trial of one and a half times the masked age on a quarter of the class', () => {
    const to = 18 * month;
    const schedule = priced({ changes: { trial: change(to) } });
    const proposal = proposalFor({ verdict: 'memoryless', maskedAge: 365, schedule });
    expect(proposal).toMatchObject({ action: 'trial', to: { interval: to }, part: { positions: 8, of: 30 } });
    expect(proposal.words.title).toBe('Try 18 months on 8 of 30 seals.');
    expect(proposal.words.worth).toContain('If it holds for the whole class');
    const past = proposalFor({ verdict: 'memoryless', maskedAge: 200 });
    expect(past).toMatchObject({ action: 'keep', reason: 'past-what-was-seen' });
  });

  it('run to failure where they do so already', () => {
    const proposal = proposalFor({ verdict: 'memoryless', schedule: priced({ today: null }) });
    expect(proposal).toMatchObject({ action: 'keep', from: { interval: null }, to: { interval: null } });
    expect(proposal.words.title).toBe('Run to failure, and hold spares.');
  });

  it('stay as they are where mild wear could turn the sum', () => {
    const schedule = priced({ share: 0.6 });
    expect(proposalFor({ verdict: 'memoryless', schedule })).toMatchObject({
      action: 'keep',
      reason: 'too-close',
    });
  });
});

describe('wearing items', () => {
  it('get a first schedule where it pays', () => {
    const proposal = proposalFor({ schedule: priced({ today: null }) });
    expect(proposal).toMatchObject({
      action: 'start',
      from: { interval: null },
      to: { interval: 5 * month },
    });
    expect(proposal.words.title).toBe('Start renewing every 5 months.');
    expect(scheduleAnswer(facts({ schedule: priced({ today: null }) })).short).toBe('Yes.');
  });

  it('get a shorter one, with its worth and what would make it wrong', () => {
    const proposal = proposalFor();
    expect(proposal).toMatchObject({ action: 'shorten', to: { interval: 5 * month } });
    expect(proposal.words.title).toBe('Shorten from 12 months to 5.');
    expect(proposal.words.worth).toBe(
      'Saves about £2\u202f500 a year (£500 to £4\u202f500 in four cases of five). It saves money in 94\u202f% of what the records leave possible.',
    );
    expect(proposal.words.whatWouldMakeItWrong[0]).toContain(
      'the £1\u202f900 for a failure includes closures or damage that would have happened anyway',
    );
    expect(proposal.words.whatWouldMakeItWrong[0]).toContain('Below £620 a failure it no longer pays.');
    expect(scheduleAnswer(facts()).short).toBe('Yes, and a shorter one pays more.');
  });

  it('get a longer one, or a trial of it where the schedule hides what lies beyond', () => {
    const best = 15 * month;
    const schedule = priced({ exact: 455, best });
    expect(proposalFor({ schedule })).toMatchObject({ action: 'lengthen', to: { interval: best } });
    expect(proposalFor({ schedule }).words.title).toBe('Lengthen from 12 months to 15.');
    const hidden = priced({ exact: 455, best, changes: { trial: change(18 * month) } });
    expect(proposalFor({ schedule: hidden, maskedAge: 365 })).toMatchObject({
      action: 'trial',
      to: { interval: best },
    });
    const further = priced({
      exact: 900,
      best: 13 * month,
      supportedAge: 400,
      beyondData: true,
      changes: { trial: change(18 * month), bestBeyondData: change(30 * month) },
    });
    expect(proposalFor({ schedule: further, maskedAge: 365 })).toMatchObject({
      action: 'trial',
      to: { interval: 18 * month },
    });
    expect(proposalFor({ schedule: priced({ exact: 455, best }), maskedAge: 240 })).toMatchObject({
      action: 'keep',
      reason: 'past-what-was-seen',
    });
  });

  it('stop at the longest age that the records support, and say so', () => {
    const schedule = priced({ exact: 900, best: 16 * month, supportedAge: 500, beyondData: true });
    const proposal = proposalFor({ schedule });
    expect(proposal).toMatchObject({ action: 'lengthen', to: { interval: 16 * month } });
    expect(proposal.beyondData?.sentence).toContain('about 30 months');
    expect(proposal.beyondData?.sentence).toContain(
      'Only up to about 16 months have at least 5 seals been seen to last',
    );
    const reached = priced({ exact: 900, best: 12 * month, supportedAge: 370, beyondData: true });
    expect(proposalFor({ schedule: reached })).toMatchObject({ action: 'keep', reason: 'beyond-data' });
    const unpaid = priced({
      today: null,
      exact: 900,
      best: 16 * month,
      beyondData: true,
      supportedAge: 500,
      share: 0.3,
    });
    expect(proposalFor({ schedule: unpaid })).toMatchObject({ action: 'keep', reason: 'beyond-data' });
  });

  it('run to failure where that is cheapest', () => {
    const keep = proposalFor({ schedule: priced({ today: null, exact: null }) });
    expect(keep).toMatchObject({ action: 'keep', reason: 'cheap-to-fail' });
    expect(keep.words.title).toBe('Run to failure, and hold spares.');
    expect(proposalFor({ schedule: priced({ exact: null }) })).toMatchObject({
      action: 'stop',
      reason: 'cheap-to-fail',
      to: { interval: null },
    });
    const hidden = priced({ exact: null, changes: { trial: change(18 * month) } });
    expect(proposalFor({ schedule: hidden, maskedAge: 365 })).toMatchObject({
      action: 'trial',
      to: { interval: 18 * month },
    });
  });

  it('keep what cannot be told from the best', () => {
    for (const exact of [340, 360, 390]) {
      const best = Math.round(exact / month) * month;
      expect(proposalFor({ schedule: priced({ exact, best }) })).toMatchObject({
        action: 'keep',
        reason: 'about-right',
      });
    }
    const weekly = priced({ today: 21, exact: 16, best: 14 });
    expect(proposalFor({ schedule: weekly }).action).toBe('shorten');
    const sameWeek = priced({ today: 18, exact: 15, best: 14 });
    expect(proposalFor({ schedule: sameWeek })).toMatchObject({ action: 'keep', reason: 'about-right' });
  });

  it('keep what is too close to call', () => {
    const close = priced({ share: 0.79 });
    const proposal = proposalFor({ schedule: close });
    expect(proposal).toMatchObject({
      action: 'keep',
      reason: 'too-close',
      share: 0.79,
      to: { interval: 365 },
    });
    expect(proposal.words.title).toBe('Keep 12 months: too close to call.');
    expect(proposal.words.worth).toContain('79\u202f%');
    expect(scheduleAnswer(facts({ schedule: close })).short).toBe('Too close to call.');
    const costly = priced({ value: -100 });
    expect(proposalFor({ schedule: costly }).action).toBe('keep');
  });
});
