import type { Database } from '../../db/connection';
import { type Asset, findAsset } from './assets.server';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';
import type { Failure, FailureEntry } from './failure';
import { failuresQuery, findFailure } from './failure-list.server';
import { type LastChange, findLastChange } from './last-change.server';
import { type FailureRefusal, refusalOfConstraint, refuseDates } from './failure-refusals';

export { type FailureFilter, findFailure, listFailures } from './failure-list.server';
export type * from './failure';

export interface LogFailureInput {
  readonly entry: FailureEntry;
  readonly personId: string;
  readonly now: Date;
  /** The day it is, in the organisation's zone. */
  readonly today: string;
  /** Failures this person was shown as perhaps the same one, and said it is another. */
  readonly seenIds?: readonly string[];
}

export type LogFailureResult =
  | { readonly outcome: 'stored' }
  /** The id is there already; `same` says whether its content is what was sent now. */
  | { readonly outcome: 'already-stored'; readonly same: boolean }
  /** Nothing stored: these may be the same failure, and the person has not said that they are not. */
  | { readonly outcome: 'perhaps-repeated'; readonly failures: Failure[] }
  | { readonly outcome: 'refused'; readonly refusal: FailureRefusal };

export type UndoResult =
  | { readonly outcome: 'done' }
  /** Somebody changed the failure meanwhile; nothing was done. */
  | { readonly outcome: 'changed-meanwhile'; readonly lastChange: LastChange | null }
  | { readonly outcome: 'refused'; readonly refusal: FailureRefusal };

const hourMilliseconds = 3_600_000;

/**
 * Stores a failure, once however often it is sent.
 *
 * Entries for one asset are taken one after the other, so that of two people who log the same failure at
 * the same moment the second is shown the first one's entry.
 */
export async function logFailure(db: Database, input: LogFailureInput): Promise<LogFailureResult> {
  const asset = await findAsset(db, input.entry.assetId);
  if (!asset) return { outcome: 'refused', refusal: { code: 'unknown-asset' } };
  try {
    return await db.transaction((trx) => logWithinTransaction(trx, input));
  } catch (error) {
    const refusal = refusalOfConstraint(constraintOf(error), asset, input.entry);
    if (!refusal) throw error;
    return { outcome: 'refused', refusal };
  }
}

async function logWithinTransaction(trx: Database, input: LogFailureInput): Promise<LogFailureResult> {
  const { personId, now, today } = input;
  const asset = await lockAsset(trx, input.entry.assetId);
  const modeId = await presentMode(trx, asset, input.entry.modeId);
  const entry = modeId === undefined ? input.entry : { ...input.entry, modeId };
  const stored = await findFailure(trx, entry.id);
  if (stored) return answerStored(stored, { ...input, entry });

  const refusal = refuseDates(asset, entry, { today, now });
  if (refusal) return { outcome: 'refused', refusal };
  if (modeId === undefined) return { outcome: 'refused', refusal: { code: 'mode-of-another-class' } };

  const perhapsSame = await findPerhapsSame(trx, asset, input);
  if (perhapsSame.some(({ id }) => !input.seenIds?.includes(id))) {
    return { outcome: 'perhaps-repeated', failures: perhapsSame };
  }

  const inserted = await trx('failures')
    .insert({
      id: entry.id,
      asset_id: asset.id,
      class_id: asset.classId,
      mode_id: entry.modeId,
      failed_on: entry.failedOn,
      failed_at: entry.failedAt,
      effect: entry.effect,
      outside_cause: entry.outsideCause,
      item_fitted_on: entry.itemFittedOn,
      note: entry.note,
      logged_at: now,
      logged_by: personId,
      updated_at: now,
    })
    .onConflict('id')
    .ignore()
    .returning('id');
  // The same id for another asset was stored between the look and the insert.
  if (inserted.length === 0) return { outcome: 'refused', refusal: { code: 'id-taken' } };
  await writeAudit(trx, {
    personId,
    action: 'log',
    subject: 'failure',
    subjectId: entry.id,
    after: { ...entry, seenIds: input.seenIds?.length ? input.seenIds : undefined },
  });
  return { outcome: 'stored' };
}

function answerStored(stored: Failure, { entry, personId, now }: LogFailureInput): LogFailureResult {
  if (stored.assetId !== entry.assetId || stored.loggedById !== personId) {
    return { outcome: 'refused', refusal: { code: 'id-taken' } };
  }
  // A moment that is "now" moves between two sends without the person having changed anything.
  const dayStated = entry.failedAt?.getTime() !== now.getTime();
  const same =
    stored.modeId === entry.modeId &&
    stored.effect === entry.effect &&
    stored.outsideCause === entry.outsideCause &&
    stored.itemFittedOn === entry.itemFittedOn &&
    stored.note === entry.note &&
    (!dayStated || stored.failedOn === entry.failedOn);
  return { outcome: 'already-stored', same };
}

async function lockAsset(trx: Database, assetId: string): Promise<Asset> {
  // Not a full lock: rows that refer to the asset may still be written elsewhere.
  await trx('assets').where('id', assetId).forNoKeyUpdate().select('id');
  const asset = await findAsset(trx, assetId);
  if (!asset) throw new Error(`asset ${assetId} went away`);
  return asset;
}

/**
 * The mode a failure is logged with: what was chosen before two modes were merged counts as the one that stayed.
 * Undefined where it is no mode of the asset's class. Nobody can merge it until the transaction ends.
 */
async function presentMode(
  trx: Database,
  asset: Asset,
  modeId: string | null,
): Promise<string | null | undefined> {
  if (modeId === null) return null;
  const mode = await trx('failure_modes')
    .where({ id: modeId, class_id: asset.classId })
    .forShare()
    .first<{ id: string; mergedInto: string | null } | undefined>({ id: 'id', mergedInto: 'merged_into' });
  return mode && (mode.mergedInto ?? mode.id);
}

/**
 * Failures that may be the one being logged: of the same position on the same day, or logged for the same
 * asset by somebody else in the last hour. Many items in one asset may well fail on one day, so there only
 * the second counts.
 */
async function findPerhapsSame(trx: Database, asset: Asset, input: LogFailureInput): Promise<Failure[]> {
  return failuresQuery(trx)
    .where('failures.asset_id', asset.id)
    .whereNull('failures.voided_at')
    .where((either) => {
      either.where((recent) =>
        recent
          .where('failures.logged_at', '>', new Date(input.now.getTime() - hourMilliseconds))
          .whereNull('failures.import_id')
          .whereNot('failures.logged_by', input.personId),
      );
      if (asset.quantity === 1) either.orWhere('failures.failed_on', input.entry.failedOn);
    })
    .orderBy('failures.logged_at', 'desc');
}

/**
 * Voids a failure: it stays, with the reason, and counts no more.
 *
 * @param input.version the version the person saw.
 */
export async function voidFailure(
  db: Database,
  input: { failureId: string; version: number; reason: string; personId: string; now: Date },
): Promise<UndoResult> {
  return db.transaction(async (trx) => {
    const changed = await trx('failures')
      .where({ id: input.failureId, version: input.version })
      .whereNull('voided_at')
      .update({
        voided_at: input.now,
        voided_by: input.personId,
        void_reason: input.reason,
        version: input.version + 1,
        updated_at: input.now,
      });
    if (changed === 0) return answerChanged(trx, input, 'void');
    await writeAudit(trx, {
      personId: input.personId,
      action: 'void',
      subject: 'failure',
      subjectId: input.failureId,
      before: { voided: false },
      after: { voided: true, reason: input.reason },
    });
    return { outcome: 'done' };
  });
}

/**
 * Takes a void back, unless the asset's dates have been moved past the failure meanwhile.
 *
 * @param input.version the version the person saw.
 */
export async function restoreFailure(
  db: Database,
  input: { failureId: string; version: number; personId: string; now: Date; today: string },
): Promise<UndoResult> {
  return db.transaction(async (trx) => {
    const failure = await findFailure(trx, input.failureId);
    if (!failure || failure.version !== input.version || failure.voidedAt === null) {
      return answerChanged(trx, input, 'restore');
    }
    const asset = await lockAsset(trx, failure.assetId);
    const refusal = refuseDates(asset, failure, input);
    if (refusal) return { outcome: 'refused', refusal };
    const changed = await trx('failures')
      .where({ id: input.failureId, version: input.version })
      .update({
        voided_at: null,
        voided_by: null,
        void_reason: null,
        version: input.version + 1,
        updated_at: input.now,
      });
    if (changed === 0) return answerChanged(trx, input, 'restore');
    await writeAudit(trx, {
      personId: input.personId,
      action: 'restore',
      subject: 'failure',
      subjectId: input.failureId,
      before: { voided: true, reason: failure.voidReason },
      after: { voided: false },
    });
    return { outcome: 'done' };
  });
}

/** The same wish of the same person sent twice is done; anything else is somebody's change in between. */
async function answerChanged(
  trx: Database,
  wish: { failureId: string; version: number; personId: string },
  action: 'void' | 'restore',
): Promise<UndoResult> {
  const lastChange = await findLastChange(trx, { subject: 'failure', subjectId: wish.failureId });
  const failure = await findFailure(trx, wish.failureId);
  const sentTwice =
    failure?.version === wish.version + 1 &&
    lastChange?.action === action &&
    lastChange.personId === wish.personId;
  return sentTwice ? { outcome: 'done' } : { outcome: 'changed-meanwhile', lastChange };
}
