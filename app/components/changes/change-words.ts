import { formatRoughMoney } from '~/advice/rough-money';
import { formatInterval, formatPercent } from '~/format/number';
import type { FollowUpWord } from '~/advice/follow-up';
import type { ChangeState, ChangeStepKind, ChangeTerms } from '~/models/schedule-change';

export const stateWords: Record<ChangeState, string> = {
  'put-forward': 'waits for a decision',
  'asked-back': 'waits for an answer',
  approved: 'approved',
  declined: 'declined',
  withdrawn: 'withdrawn',
  'taken-back': 'taken back',
};

export const stepWords: Record<ChangeStepKind, string> = {
  'put-forward': 'put it forward',
  'asked-back': 'asked back',
  answered: 'answered',
  approved: 'approved it',
  declined: 'declined it',
  withdrawn: 'withdrew it',
  'taken-back': 'took it back',
};

export const followUpNames: Record<FollowUpWord, string> = {
  'too-early': 'too early to say',
  helped: 'helped',
  'no-difference': 'made no difference',
  worse: 'made it worse',
};

/** "£2 800 a year (£2 100 to £3 400)", or that it could not be priced. */
export function savingWords({ saving }: Pick<ChangeTerms, 'saving'>, currency: string): string {
  if (saving === null) return 'not priced';
  const money = (amount: number) => formatRoughMoney(amount, currency);
  const range = formatInterval(saving.low, saving.high, money);
  return saving.value < 0
    ? `costs ${money(-saving.value)} a year more (saving ${range})`
    : `${money(saving.value)} a year (${range})`;
}

/** How sure the saving is. */
export function sureWords({ share }: Pick<ChangeTerms, 'share'>): string {
  return share === null
    ? 'not priced'
    : `saves in ${formatPercent(share)} of what the records leave possible`;
}
