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
  revised: 'put it differently',
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

/** "£2 800 a year (£2 100 to £3 400)", what it costs more, or that it could not be priced. */
export function savingWords({ saving }: Pick<ChangeTerms, 'saving'>, currency: string): string {
  if (saving === null) return 'not priced';
  const { value, low, high } = saving;
  // A minus sign stays with its amount at the end of a line.
  const money = (amount: number) => formatRoughMoney(amount, currency).replace('\u2212', '\u2212\u2060');
  if (value >= 0) return `${money(value)} a year (${formatInterval(low, high, money)})`;
  const range =
    high <= 0 ? formatInterval(-high, -low, money) : `from ${money(-low)} more to ${money(high)} less`;
  return `costs ${money(-value)} a year more (${range})`;
}

/** How sure the saving is. */
export function sureWords({ share }: Pick<ChangeTerms, 'share'>): string {
  return share === null
    ? 'not priced'
    : `saves in ${formatPercent(share)} of what the records leave possible`;
}
