import { describe, expect, it } from 'vitest';
import {
  alarmNews,
  followUpNews,
  newsOf,
  whyOf,
  type ClassComparison,
  type RecordChanges,
} from '~/advice/class-news';

const nothing: RecordChanges = {
  failuresLogged: 0,
  plannedWorkLogged: 0,
  imports: [],
  voided: 0,
  restored: 0,
  corrected: 0,
  settingsChanged: false,
  scheduleChanged: false,
};
type Differences = {
  before?: Partial<ClassComparison['before']>;
  now?: Partial<ClassComparison['now']>;
} & Partial<Pick<ClassComparison, 'newCautions' | 'changes'>>;

function comparison({ before, now, ...rest }: Differences): ClassComparison {
  return {
    itemPlural: 'seals',
    before: { verdict: 'memoryless', trend: 'level', action: 'keep', ...before },
    now: {
      verdict: 'memoryless',
      trend: 'level',
      action: 'keep',
      proposalTitle: 'Keep it.',
      savingPerYearMinor: null,
      ...now,
    },
    newCautions: [],
    changes: nothing,
    ...rest,
  };
}
const sentences = (differences: Differences) =>
  newsOf(comparison(differences)).map(({ kind, sentence }) => [kind, sentence]);

describe('what a night made different', () => {
  it('is nothing where people would decide the same', () => {
    expect(sentences({})).toEqual([]);
    expect(sentences({ before: { trend: 'unclear' } })).toEqual([]);
    expect(sentences({ before: { action: 'gather' } })).toEqual([]);
    expect(sentences({ newCautions: [{ code: 'rounded-dates', severity: 'note' }] })).toEqual([]);
  });

  it('is a verdict that changed, or that could be told for the first time', () => {
    expect(sentences({ now: { verdict: 'wear-out' } })).toEqual([
      ['verdict-changed', 'Seals are now called wear-out; they were memoryless.'],
    ]);
    expect(sentences({ before: { verdict: 'undecided' }, now: { verdict: 'wear-out' } })).toEqual([
      ['became-decidable', 'Seals can be told now: wear-out.'],
    ]);
    expect(sentences({ now: { verdict: 'undecided' } })).toEqual([
      ['verdict-changed', 'Seals are now called undecided; they were memoryless.'],
    ]);
  });

  it('is a trend that began or ended', () => {
    expect(sentences({ now: { trend: 'rising' } })).toEqual([
      ['trend-changed', 'The trend is now rising; it was level.'],
    ]);
    expect(sentences({ before: { trend: 'falling' }, now: { trend: 'unclear' } })).toHaveLength(1);
  });

  it('is a proposal that came, with its money, or went', () => {
    const now = {
      action: 'shorten',
      proposalTitle: 'Shorten to 5 months.',
      savingPerYearMinor: 280_000,
    } as const;
    expect(newsOf(comparison({ now }))).toMatchObject([
      {
        kind: 'proposal-changed',
        sentence: 'New proposal: Shorten to 5 months.',
        moneyPerYearMinor: 280_000,
      },
    ]);
    expect(newsOf(comparison({ before: { action: 'stop' }, now: { savingPerYearMinor: 5 } }))).toMatchObject([
      { sentence: 'The earlier proposal no longer stands. Keep it.', moneyPerYearMinor: null },
    ]);
  });

  it('is a caution that appeared', () => {
    expect(
      sentences({
        newCautions: [
          { code: 'few-failures', severity: 'caution' },
          { code: 'statutory', severity: 'stop' },
          { code: 'rounded-dates', severity: 'note' },
        ],
      }),
    ).toEqual([['cautions-appeared', 'New cautions: few failures, statutory.']]);
  });
});

describe('what brought it about', () => {
  it.each([
    [{}, /^Since then nothing was recorded/],
    [{ failuresLogged: 1 }, /^1 failure was logged\.$/],
    [{ failuresLogged: 3, voided: 2 }, /^2 records were voided and 3 failures were logged\.$/],
    [
      { imports: ['may.csv'], settingsChanged: true, corrected: 1 },
      /^“may\.csv” came in, 1 record was corrected and the settings of the class were changed\.$/,
    ],
    [{ scheduleChanged: true }, /^Its planned maintenance was changed\.$/],
    [{ restored: 2, plannedWorkLogged: 1 }, /^2 records were put back and planned work was logged 1 time\.$/],
  ] satisfies [Partial<RecordChanges>, RegExp][])('of %j', (changes, words) => {
    expect(whyOf({ ...nothing, ...changes })).toMatch(words);
  });
});

it('tells alarms of one night together', () => {
  expect(alarmNews('seals', [])).toBeNull();
  const news = alarmNews('seals', [
    { kind: 'old-first', logE: Math.log(40), failures: 21 },
    { kind: 'rate-rising', logE: Math.log(25), failures: 22 },
  ]);
  expect(news?.sentence).toBe('Alarm: The old seals fail first. Seals fail more often than they used to.');
  expect(news?.why).toContain('21 failures are behind it');
});

it('tells what came of a change', () => {
  expect(followUpNews('worse', 'It made it worse. 9 failures …')).toMatchObject({
    kind: 'follow-up',
    sentence: 'A change made it worse.',
    why: 'It made it worse. 9 failures …',
  });
});
