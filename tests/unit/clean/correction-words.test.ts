import { describe, expect, it } from 'vitest';
import {
  auditedChanges,
  correctionWords,
  fieldChanges,
  heldParts,
} from '~/components/clean/correction-words';
import { effectSentence } from '~/components/clean/effect-words';

const names = { modes: { a: 'Leaking', b: 'Cracked' }, clock: 'calendar-days' } as const;
const entry = (
  action: string,
  before: Record<string, unknown> | null,
  after: Record<string, unknown> | null,
) => ({
  action,
  personName: 'Ada',
  at: new Date('2026-05-20T09:00:00Z'),
  before,
  after,
});

describe('a correction in words', () => {
  it('names the modes', () => {
    expect(correctionWords({ kind: 'merge-mode', from: 'a', modeId: 'b' }, names.modes)).toBe(
      'Merge Leaking into Cracked',
    );
    expect(correctionWords({ kind: 'mode', modeId: null }, names.modes)).toBe('Take the mode off');
  });
});

describe('what changed', () => {
  it('is told part by part, from what to what', () => {
    expect(
      fieldChanges(
        { failedOn: '2026-02-03', failedAt: '2026-02-03T11:00:00Z', modeId: 'a', itemAge: 400 },
        { failedOn: '2026-02-01', failedAt: null, modeId: 'b', itemAge: null },
        names,
      ),
    ).toEqual([
      { name: 'Day', from: '3 Feb 2026', to: '1 Feb 2026' },
      { name: 'Time of day', from: 'known', to: 'not known' },
      { name: 'Mode', from: 'Leaking', to: 'Cracked' },
      { name: 'Age given', from: '400 days', to: 'none' },
    ]);
  });

  it('is read from an undone entry, a correction and an import alike', () => {
    const from = 'yes';
    const to = 'no, voided: logged twice';
    const counts = [{ name: 'Counts', from, to }];
    expect(
      auditedChanges(entry('void', { voided: false }, { voided: true, reason: 'logged twice' }), names),
    ).toEqual(counts);
    expect(
      auditedChanges(entry('void', { voidReason: null }, { voidReason: 'logged twice' }), names),
    ).toEqual(counts);
    expect(
      auditedChanges(
        entry(
          'import',
          { effect: 'renewed', mode_id: 'a', note: 'x' },
          { effect: 'patched', mode_id: 'a', note: 'y' },
        ),
        names,
      ),
    ).toEqual([{ name: 'What was done', from: 'renewed', to: 'patched' }]);
  });

  it('is nothing where an entry was logged, and nothing it cannot read', () => {
    expect(auditedChanges(entry('log', null, { effect: 'renewed' }), names)).toEqual([]);
    expect(heldParts({ effect: 'exploded' })).toEqual({});
    expect(heldParts(null)).toEqual({});
  });
});

describe('what it does to the verdict, in a sentence', () => {
  const standing = { verdict: 'wear-out', trend: 'level', proposal: 'Shorten' } as const;
  it('says when nothing changes', () => {
    expect(effectSentence(standing, standing)).toBe('Verdict, trend and proposal stay as they are.');
  });
  it('says what changes, the verdict first', () => {
    expect(effectSentence(standing, { verdict: 'undecided', trend: 'unclear', proposal: 'Wait' })).toBe(
      'The verdict changes from wear-out to undecided. The trend changes from level to unclear. Another thing is proposed.',
    );
    expect(effectSentence(standing, { ...standing, proposal: 'Wait' })).toBe(
      'The verdict stays wear-out. Another thing is proposed.',
    );
  });
});
