import { formatNoun } from '~/format/number';
import { alarmEvidence, alarmTitle } from './alarm-words';
import type { AlarmKind } from './alarm-findings';
import { capitalised } from './capitalised';
import { cautionNames } from './caution-names';
import type { Caution } from './conclusion';
import type { FollowUpWord } from './follow-up';
import { changingActions, type Action } from './proposal';
import type { Trend } from './trend';
import type { Verdict } from './verdict';

/** What can be different after a night, the kind that matters most first. */
export const newsKinds = [
  'alarm-raised',
  'follow-up',
  'verdict-changed',
  'became-decidable',
  'proposal-changed',
  'trend-changed',
  'cautions-appeared',
] as const;
export type NewsKind = (typeof newsKinds)[number];

/** One thing that a night made different in a class. */
export interface ClassNews {
  readonly kind: NewsKind;
  /** What is different. */
  readonly sentence: string;
  /** What brought it about. */
  readonly why: string;
  /** Worth a year, integer minor units; null where it has no price. */
  readonly moneyPerYearMinor: number | null;
}

interface Standing {
  readonly verdict: Verdict;
  readonly trend: Trend;
  readonly action: Action;
}

/** A class on two nights. */
export interface ClassComparison {
  readonly itemPlural: string;
  readonly before: Standing;
  readonly now: Standing & {
    readonly proposalTitle: string;
    readonly savingPerYearMinor: number | null;
  };
  /** Cautions of today that were not there before. */
  readonly newCautions: readonly Pick<Caution, 'code' | 'severity'>[];
  readonly changes: RecordChanges;
}

/** What happened to a class's records between two nights. */
export interface RecordChanges {
  readonly failuresLogged: number;
  readonly plannedWorkLogged: number;
  /** Files whose rows came in. */
  readonly imports: readonly string[];
  readonly voided: number;
  readonly restored: number;
  readonly corrected: number;
  readonly settingsChanged: boolean;
  readonly scheduleChanged: boolean;
}

/** What is different in a class since the night before, each with what brought it about. */
export function newsOf({ itemPlural, before, now, newCautions, changes }: ClassComparison): ClassNews[] {
  const items = capitalised(itemPlural);
  const why = whyOf(changes);
  const news: ClassNews[] = [];
  const add = (kind: NewsKind, sentence: string, moneyPerYearMinor: number | null = null) =>
    news.push({ kind, sentence, why, moneyPerYearMinor });

  if (before.verdict !== now.verdict) {
    if (before.verdict === 'undecided') add('became-decidable', `${items} can be told now: ${now.verdict}.`);
    else add('verdict-changed', `${items} are now called ${now.verdict}; they were ${before.verdict}.`);
  }
  if (before.trend !== now.trend && (isTrend(before.trend) || isTrend(now.trend))) {
    add('trend-changed', `The trend is now ${now.trend}; it was ${before.trend}.`);
  }
  if (
    before.action !== now.action &&
    [before.action, now.action].some((one) => changingActions.includes(one))
  ) {
    const isChange = changingActions.includes(now.action);
    add(
      'proposal-changed',
      isChange
        ? `New proposal: ${now.proposalTitle}`
        : `The earlier proposal no longer stands. ${now.proposalTitle}`,
      isChange ? now.savingPerYearMinor : null,
    );
  }
  const worth = newCautions.filter(({ severity }) => severity !== 'note');
  if (worth.length > 0) {
    const names = worth.map(({ code }) => cautionNames[code]).join(', ');
    add('cautions-appeared', `New ${worth.length === 1 ? 'caution' : 'cautions'}: ${names}.`);
  }
  return news;
}

function isTrend(trend: Trend): boolean {
  return trend === 'rising' || trend === 'falling';
}

/** An alarm as news. */
export function alarmNews(
  itemPlural: string,
  alarms: readonly { readonly kind: AlarmKind; readonly logE: number; readonly failures: number }[],
): ClassNews | null {
  const [first] = alarms;
  if (first === undefined) return null;
  return {
    kind: 'alarm-raised',
    sentence: `Alarm: ${alarms.map(({ kind }) => alarmTitle(kind, itemPlural)).join('. ')}.`,
    why: alarmEvidence(first),
    moneyPerYearMinor: null,
  };
}

const followUpSentences: Record<FollowUpWord, string> = {
  'too-early': 'A change is in effect and followed: it is too early to say.',
  helped: 'A change helped.',
  'no-difference': 'A change made no difference.',
  worse: 'A change made it worse.',
};

/** A follow-up whose word is another than the night before. */
export function followUpNews(word: FollowUpWord, sentence: string): ClassNews {
  return { kind: 'follow-up', sentence: followUpSentences[word], why: sentence, moneyPerYearMinor: null };
}

/** What happened to the records since the night before, in a sentence. */
export function whyOf(changes: RecordChanges): string {
  const { failuresLogged, plannedWorkLogged, imports, voided, restored, corrected } = changes;
  const parts = [
    imports.length > 0 && `${imports.map((name) => `“${name}”`).join(' and ')} came in`,
    voided > 0 && `${formatNoun(voided, 'record')} ${voided === 1 ? 'was' : 'were'} voided`,
    restored > 0 && `${formatNoun(restored, 'record')} ${restored === 1 ? 'was' : 'were'} put back`,
    corrected > 0 && `${formatNoun(corrected, 'record')} ${corrected === 1 ? 'was' : 'were'} corrected`,
    changes.settingsChanged && 'the settings of the class were changed',
    changes.scheduleChanged && 'its planned maintenance was changed',
    failuresLogged > 0 &&
      `${formatNoun(failuresLogged, 'failure')} ${failuresLogged === 1 ? 'was' : 'were'} logged`,
    plannedWorkLogged > 0 && `planned work was logged ${formatNoun(plannedWorkLogged, 'time')}`,
  ].filter((part) => part !== false);
  if (parts.length === 0) {
    return 'Since then nothing was recorded: more time without a failure, or what the other classes show, moved it.';
  }
  const last = parts.pop()!;
  return capitalised(parts.length === 0 ? `${last}.` : `${parts.join(', ')} and ${last}.`);
}
