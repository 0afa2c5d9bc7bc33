import type { Database } from '../../db/connection';
import { findAsset } from './assets.server';
import { writeAudit } from './audit.server';
import { type FittedRefusal, type FittedRow, fittedRowsText, refuseFittedRows } from './fitted-rows';
import { type LastChange, findLastChange } from './last-change.server';
import type { SiteScope } from './sites.server';

export type SaveFittedResult =
  | { readonly outcome: 'saved' | 'unchanged' | 'not-found' }
  | { readonly outcome: 'refused'; readonly refusal: FittedRefusal }
  /** Nothing saved: somebody else saved first. */
  | {
      readonly outcome: 'changed-meanwhile';
      readonly current: FittedRow[];
      readonly lastChange: LastChange | null;
    };

/** An asset of several items, with how many of them have a known day of fitting. */
export interface GroupAsset {
  readonly id: string;
  readonly tag: string;
  readonly siteName: string;
  readonly quantity: number;
  /** Days of fitting are known, or, where the watch opened with the service, are that day. */
  readonly datedItems: number;
}

/** How many of an asset's items, in place when its watch opened, had been fitted when; the rest is not known. */
export async function listFittedItems(db: Database, assetId: string): Promise<FittedRow[]> {
  return db('fitted_items')
    .where('asset_id', assetId)
    .orderBy('fitted_on')
    .select<FittedRow[]>({ fittedOn: 'fitted_on', count: 'count' });
}

/**
 * Puts a list in place of the one stored, whole or not at all.
 *
 * @param input.seen the list the person saw when they began.
 */
export async function saveFittedItems(
  db: Database,
  input: {
    assetId: string;
    rows: readonly FittedRow[];
    seen: readonly FittedRow[];
    personId: string;
  },
): Promise<SaveFittedResult> {
  const { assetId, rows, seen, personId } = input;
  return db.transaction(async (trx): Promise<SaveFittedResult> => {
    // Not a full lock: rows that refer to the asset may still be written elsewhere.
    await trx('assets').where('id', assetId).forNoKeyUpdate().select('id');
    const asset = await findAsset(trx, assetId);
    if (!asset) return { outcome: 'not-found' };
    const current = await listFittedItems(trx, assetId);
    if (areAlike(current, rows)) return { outcome: 'unchanged' };
    if (!areAlike(current, seen)) {
      const lastChange = await findLastChange(trx, { subject: 'fitted-items', subjectId: assetId });
      return { outcome: 'changed-meanwhile', current, lastChange };
    }
    const refusal = refuseFittedRows(asset, rows);
    if (refusal) return { outcome: 'refused', refusal };

    await trx('fitted_items').where('asset_id', assetId).delete();
    if (rows.length > 0) {
      await trx('fitted_items').insert(
        rows.map(({ fittedOn, count }) => ({ asset_id: assetId, fitted_on: fittedOn, count })),
      );
    }
    await writeAudit(trx, {
      personId,
      action: 'set-fitted-items',
      subject: 'fitted-items',
      subjectId: assetId,
      before: current,
      after: rows,
    });
    return { outcome: 'saved' };
  });
}

/** The assets of a class that hold several items, within the scope, by tag. */
export async function listGroupAssets(
  db: Database,
  classId: string,
  scope: SiteScope,
): Promise<GroupAsset[]> {
  const query = db('assets')
    .join('sites', 'sites.id', 'assets.site_id')
    .where('assets.class_id', classId)
    .where('assets.quantity', '>', 1)
    .orderByRaw('lower(assets.tag)')
    .select<GroupAsset[]>(
      'assets.id',
      'assets.tag',
      'sites.name as siteName',
      'assets.quantity',
      db.raw(
        `case when assets.watched_from = assets.in_service_on then assets.quantity
              else (select least(coalesce(sum(count), 0), assets.quantity)::integer
                      from fitted_items where asset_id = assets.id) end as "datedItems"`,
      ),
    );
  return scope === 'all' ? query : query.whereIn('assets.site_id', [...scope]);
}

function areAlike(one: readonly FittedRow[], other: readonly FittedRow[]): boolean {
  return fittedRowsText(one) === fittedRowsText(other);
}
