/** What a failure is checked against. Days are 'YYYY-MM-DD' in the organisation's zone. */
export interface AssetDates {
  readonly inServiceOn: string;
  readonly watchedUntil: string | null;
  readonly retiredOn: string | null;
}

export interface FailureDates {
  readonly failedOn: string;
  /** The moment, where the time of day is known. */
  readonly failedAt: Date | null;
  readonly itemFittedOn: string | null;
}

/** Why a failure cannot be stored as it stands, with the day it runs up against. */
export type FailureRefusal =
  | { readonly code: 'unknown-asset' }
  | { readonly code: 'id-taken' }
  | { readonly code: 'mode-of-another-class' }
  | { readonly code: 'in-future' }
  | { readonly code: 'before-service'; readonly day: string }
  | { readonly code: 'after-retirement'; readonly day: string }
  | { readonly code: 'after-watch'; readonly day: string }
  | { readonly code: 'fitted-after-failed'; readonly day: string }
  | { readonly code: 'fitted-before-service'; readonly day: string };

/**
 * The first thing about its dates that makes a failure impossible, or null.
 *
 * @param present the day and the moment it is now.
 */
export function refuseDates(
  asset: AssetDates,
  failure: FailureDates,
  present: { today: string; now: Date },
): FailureRefusal | null {
  const { failedOn, failedAt, itemFittedOn } = failure;
  if (failedOn > present.today || (failedAt !== null && failedAt > present.now)) return { code: 'in-future' };
  if (failedOn < asset.inServiceOn) return { code: 'before-service', day: asset.inServiceOn };
  if (asset.retiredOn !== null && failedOn > asset.retiredOn) {
    return { code: 'after-retirement', day: asset.retiredOn };
  }
  if (asset.watchedUntil !== null && failedOn > asset.watchedUntil) {
    return { code: 'after-watch', day: asset.watchedUntil };
  }
  if (itemFittedOn !== null && itemFittedOn > failedOn)
    return { code: 'fitted-after-failed', day: itemFittedOn };
  if (itemFittedOn !== null && itemFittedOn < asset.inServiceOn) {
    return { code: 'fitted-before-service', day: asset.inServiceOn };
  }
  return null;
}

/**
 * The same answer from the database's own constraints, which have the last word: what they refuse is told
 * as a refusal too. Undefined for a constraint that is not about the content of a failure.
 */
export function refusalOfConstraint(
  constraint: string | undefined,
  asset: AssetDates,
  failure: FailureDates,
): FailureRefusal | undefined {
  switch (constraint) {
    case 'record_in_future':
      return { code: 'in-future' };
    case 'record_before_service':
      return { code: 'before-service', day: asset.inServiceOn };
    case 'record_after_retirement':
      return { code: 'after-retirement', day: asset.retiredOn ?? failure.failedOn };
    case 'failures_fitted_before_failed':
      return { code: 'fitted-after-failed', day: failure.itemFittedOn ?? failure.failedOn };
    case 'failures_mode_id_class_id_fkey':
      return { code: 'mode-of-another-class' };
    case 'failures_asset_id_class_id_fkey':
      return { code: 'unknown-asset' };
    default:
      return undefined;
  }
}
