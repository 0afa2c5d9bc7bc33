import { refuseChange } from '~/advice/change-guards';
import { tryInterval } from '~/advice/price-schedule';
import { changingActions } from '~/advice/proposal';
import type { Database } from '../../db/connection';
import type { Assessment } from './assessments.server';
import { actionBetween, type ChangeAction, type ChangeTerms } from './schedule-change';
import { findPart } from './trial-part.server';

/** What a lead asks for. */
export interface WantedTerms {
  /** Clock units; null for run to failure. */
  to: number | null;
  scope: 'class' | 'part';
  /** Of a trial: whole sites, and assets by tag. */
  sites: readonly string[];
  tags: readonly string[];
  reason: string;
}

export type TermsResult =
  | { outcome: 'terms'; terms: ChangeTerms; origin: 'proposal' | 'by-hand' }
  /** Why it cannot be put forward, in a sentence about one thing that was asked for. */
  | { outcome: 'refused'; about: 'interval' | 'policy' | 'tags'; sentence: string };

/** What a lead asks for as it can be put forward: which action it is, on which assets, and at which price. */
export async function termsOf(
  db: Database,
  { classId, itemPlural, assessment }: { classId: string; itemPlural: string; assessment: Assessment },
  wanted: WantedTerms,
): Promise<TermsResult> {
  const onPart = wanted.scope === 'part';
  const { findings, conclusion } = assessment;
  const { clock, schedule } = findings;
  const guard = refuseChange({ to: wanted.to, onPart }, { schedule, conclusion, clock, itemPlural });
  if (guard !== null) {
    return { outcome: 'refused', about: wanted.to === null ? 'policy' : 'interval', sentence: guard };
  }
  const part = onPart ? await findPart(db, classId, wanted) : null;
  const badPart = part === null ? null : refusePart(part);
  if (badPart !== null) return { outcome: 'refused', about: 'tags', sentence: badPart };
  return {
    outcome: 'terms',
    terms: pricedTerms(wanted, assessment, part?.assetIds ?? []),
    origin: isProposal(wanted, assessment) ? 'proposal' : 'by-hand',
  };
}

function refusePart({
  unknownTags,
  assetIds,
  ofAssets,
}: Awaited<ReturnType<typeof findPart>>): string | null {
  if (unknownTags.length > 0) {
    return `No asset of this class in service is tagged ${unknownTags.slice(0, 5).join(', ')}.`;
  }
  if (assetIds.length === 0) return 'Choose a site, or name some assets by tag.';
  return assetIds.length === ofAssets
    ? 'That is the whole class; a trial needs a rest to be compared with.'
    : null;
}

/** Priced with the night's own code, where a price comes out. */
function pricedTerms(wanted: WantedTerms, { findings }: Assessment, assetIds: string[]): ChangeTerms {
  const { schedule, clock } = findings;
  const from = schedule.current.interval;
  const action: ChangeAction =
    wanted.scope === 'part' ? 'trial' : (actionBetween(from, wanted.to) ?? 'start');
  const tried =
    schedule.kind === 'priced'
      ? tryInterval(schedule, { interval: wanted.to, ...schedule.costs }, clock)
      : null;
  return {
    action,
    from,
    to: wanted.to,
    reason: wanted.reason,
    saving: tried === null ? null : tried.change.savingPerYear,
    share: tried === null ? null : tried.change.share,
    assetIds,
  };
}

function isProposal(wanted: WantedTerms, { conclusion, findings }: Assessment): boolean {
  const { action, to } = conclusion.proposal;
  return (
    changingActions.includes(action) &&
    (action === 'trial') === (wanted.scope === 'part') &&
    isSameInterval(to.interval, wanted.to, findings.clock)
  );
}

/** The form gives whole units where the night has the digits. */
function isSameInterval(
  a: number | null,
  b: number | null,
  clock: 'calendar-days' | 'operating-hours',
): boolean {
  if (a === null || b === null) return a === b;
  return Math.abs(a - b) < (clock === 'calendar-days' ? 1 : 0.005 * a);
}
