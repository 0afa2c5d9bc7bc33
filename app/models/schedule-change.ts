import type { FollowUp } from '~/advice/follow-up';
import type { Conclusion } from '~/advice/conclusion';
import type { Findings } from '~/advice/findings';

/** What may be changed about a schedule. */
export const changeActions = ['start', 'shorten', 'lengthen', 'stop', 'trial'] as const;
export type ChangeAction = (typeof changeActions)[number];

/** How a list is cut: waiting for somebody, waiting for a decision, in effect and followed, or past. */
export const changeGroups = ['open', 'to-decide', 'followed', 'past'] as const;
export type ChangeGroup = (typeof changeGroups)[number];

/** How a list may be sorted; by state, those that wait stand first. */
export const changeSorts = ['state', 'class', 'saving', 'put-forward'] as const;
export type ChangeSort = (typeof changeSorts)[number];

export const changeStates = [
  'put-forward',
  'asked-back',
  'approved',
  'declined',
  'withdrawn',
  'taken-back',
] as const;
export type ChangeState = (typeof changeStates)[number];

/** Waiting for somebody. */
export const openStates: readonly ChangeState[] = ['put-forward', 'asked-back'];

/** What is to change, why, and what it is expected to be worth. */
export interface ChangeTerms {
  readonly action: ChangeAction;
  /** Clock units of the class; null for run to failure. */
  readonly from: number | null;
  readonly to: number | null;
  readonly reason: string;
  /** Integer minor units a year with the middle 80 % of the draws; null where it could not be priced. */
  readonly saving: { readonly value: number; readonly low: number; readonly high: number } | null;
  /** Share of the draws in which it saves money. */
  readonly share: number | null;
  /** Of a trial: the assets it runs on; empty for the whole class. */
  readonly assetIds: readonly string[];
}

export const changeSteps = [
  'put-forward',
  'asked-back',
  'answered',
  'revised',
  'approved',
  'declined',
  'withdrawn',
  'taken-back',
] as const;
export type ChangeStepKind = (typeof changeSteps)[number];

export interface ChangeStep {
  readonly step: ChangeStepKind;
  readonly words: string | null;
  readonly personName: string;
  readonly at: Date;
}

/** A change as a list shows it. */
export interface ChangeRow extends Omit<ChangeTerms, 'assetIds'> {
  readonly id: string;
  readonly classId: string;
  readonly className: string;
  readonly itemPlural: string;
  readonly clock: Findings['clock'];
  readonly state: ChangeState;
  readonly origin: 'proposal' | 'by-hand';
  readonly putForwardById: string;
  readonly putForwardByName: string;
  readonly putForwardAt: Date;
  readonly decidedByName: string | null;
  readonly decidedAt: Date | null;
  readonly takesEffectOn: string | null;
  readonly takenBackOn: string | null;
  /** How many assets a trial runs on; 0 for the whole class. */
  readonly assets: number;
  readonly followUp: FollowUp | null;
  readonly followUpAsOf: string | null;
  readonly version: number;
}

/** A change with all that was said of it and what it rested on. */
export interface Change extends ChangeRow {
  readonly taskId: string | null;
  readonly newTaskId: string | null;
  /** Whether the class is statutory or endangers people today. */
  readonly isMarked: boolean;
  readonly steps: readonly ChangeStep[];
  /** The assets of a trial, by tag. */
  readonly part: readonly { readonly id: string; readonly tag: string; readonly siteName: string }[];
  /** The assessment as it was that night. */
  readonly evidence: {
    readonly asOf: string;
    readonly findings: Findings;
    readonly conclusion: Conclusion;
  };
}

/** Which action leads from one interval to another, for the whole class; null where they are the same. */
export function actionBetween(from: number | null, to: number | null): Exclude<ChangeAction, 'trial'> | null {
  if (from === to) return null;
  if (from === null) return 'start';
  if (to === null) return 'stop';
  return to < from ? 'shorten' : 'lengthen';
}
