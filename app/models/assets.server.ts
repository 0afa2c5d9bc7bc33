import type { Knex } from 'knex';
import type { Database } from '../../db/connection';
import type { SiteScope } from './sites.server';

/** An asset as a list shows it. */
export interface AssetSummary {
  readonly id: string;
  readonly tag: string;
  readonly quantity: number;
  readonly className: string;
  readonly itemSingular: string;
  readonly siteName: string;
  readonly areaName: string | null;
  readonly retiredOn: string | null;
}

/** An asset with all that a record of it is checked against. Days are 'YYYY-MM-DD'. */
export interface Asset extends AssetSummary {
  readonly classId: string;
  readonly siteId: string;
  readonly itemPlural: string;
  readonly clock: 'calendar-days' | 'operating-hours';
  readonly inServiceOn: string;
  readonly watchedFrom: string;
  readonly watchedUntil: string | null;
  /** When the item in place at the start of the watch had been fitted, if anybody knows. */
  readonly itemFittedOn: string | null;
}

export interface AssetFilter {
  readonly scope: SiteScope;
  /** Any part of a tag, in any case. */
  readonly tagPart?: string;
  readonly siteId?: string;
  readonly classId?: string;
}

const summaryColumns = {
  id: 'assets.id',
  tag: 'assets.tag',
  quantity: 'assets.quantity',
  className: 'asset_classes.name',
  itemSingular: 'asset_classes.item_singular',
  siteName: 'sites.name',
  areaName: 'areas.name',
  retiredOn: 'assets.retired_on',
};

function joined(db: Database): Knex.QueryBuilder {
  return db('assets')
    .join('asset_classes', 'asset_classes.id', 'assets.class_id')
    .join('sites', 'sites.id', 'assets.site_id')
    .leftJoin('areas', 'areas.id', 'assets.area_id');
}

function within(query: Knex.QueryBuilder, scope: SiteScope): Knex.QueryBuilder {
  return scope === 'all' ? query : query.whereIn('assets.site_id', [...scope]);
}

const literal = (text: string) => text.replace(/[\\%_]/g, (character) => `\\${character}`);

function filtered(db: Database, filter: AssetFilter): Knex.QueryBuilder {
  const query = within(joined(db), filter.scope);
  if (filter.tagPart) query.whereRaw('lower(assets.tag) like lower(?)', [`%${literal(filter.tagPart)}%`]);
  if (filter.siteId) query.where('assets.site_id', filter.siteId);
  if (filter.classId) query.where('assets.class_id', filter.classId);
  return query;
}

/** One asset by id, whatever its site: the caller asks whether the person may see that site. */
export async function findAsset(db: Database, assetId: string): Promise<Asset | undefined> {
  return joined(db)
    .where('assets.id', assetId)
    .first<Asset | undefined>({
      ...summaryColumns,
      classId: 'assets.class_id',
      siteId: 'assets.site_id',
      itemPlural: 'asset_classes.item_plural',
      clock: 'asset_classes.clock',
      inServiceOn: 'assets.in_service_on',
      watchedFrom: 'assets.watched_from',
      watchedUntil: 'assets.watched_until',
      itemFittedOn: 'assets.item_fitted_on',
    });
}

/** The id of the asset with exactly this tag, in any case, within the scope. */
export async function findAssetIdByTag(
  db: Database,
  tag: string,
  scope: SiteScope,
): Promise<string | undefined> {
  const row = await within(db('assets').whereRaw('lower(assets.tag) = lower(?)', [tag]), scope).first<
    { id: string } | undefined
  >('assets.id');
  return row?.id;
}

/** One page of assets, those in service first, then by tag; `page` starts at 1. */
export async function listAssets(
  db: Database,
  filter: AssetFilter,
  paging: { page: number; perPage: number },
): Promise<{ assets: AssetSummary[]; total: number }> {
  const [assets, counted] = await Promise.all([
    filtered(db, filter)
      .select<AssetSummary[]>(summaryColumns)
      .orderByRaw('assets.retired_on is not null, lower(assets.tag)')
      .limit(paging.perPage)
      .offset((paging.page - 1) * paging.perPage),
    filtered(db, filter).count<{ total: number }[]>({ total: 'assets.id' }),
  ]);
  return { assets, total: Number(counted[0]?.total ?? 0) };
}

/** Assets this person logged a failure of, the latest first, those still in service. */
export async function listRecentAssets(
  db: Database,
  personId: string,
  scope: SiteScope,
  limit: number,
): Promise<AssetSummary[]> {
  const latest = db('failures')
    .where('logged_by', personId)
    .groupBy('asset_id')
    .select('asset_id')
    .max({ logged_at: 'logged_at' })
    .as('latest');
  return within(joined(db), scope)
    .join(latest, 'latest.asset_id', 'assets.id')
    .whereNull('assets.retired_on')
    .select<AssetSummary[]>(summaryColumns)
    .orderBy('latest.logged_at', 'desc')
    .limit(limit);
}

/** The classes that have assets at a site, with how many, by name. */
export async function listClassesAtSite(
  db: Database,
  siteId: string,
): Promise<{ id: string; name: string; assets: number }[]> {
  return db('assets')
    .join('asset_classes', 'asset_classes.id', 'assets.class_id')
    .where('assets.site_id', siteId)
    .groupBy('asset_classes.id')
    .orderByRaw('lower(asset_classes.name)')
    .select<{ id: string; name: string; assets: number }[]>('asset_classes.id', 'asset_classes.name')
    .count({ assets: 'assets.id' });
}

/**
 * What the records say of when the item in place was fitted.
 *
 * `recorded`: a renewal, or the register, gives the day. `assumed`: nothing does, and the day is the
 * one the asset itself went into service, which the item in place may or may not date from. With more
 * than one item in the asset the day is that of the original ones, never a recorded renewal, since a
 * renewal does not say which of them it was.
 */
export interface LastFitted {
  readonly on: string;
  readonly standing: 'recorded' | 'assumed';
}

/** @param by the day of the failure in question: renewals after it are not looked at. */
export async function lastFitted(db: Database, asset: Asset, by: string): Promise<LastFitted> {
  if (asset.quantity === 1) {
    const renewed = { asset_id: asset.id, voided_at: null };
    const [failure, planned] = await Promise.all([
      db('failures')
        .where({ ...renewed, effect: 'renewed' })
        .where('failed_on', '<=', by)
        .max<{ on: string | null }>({ on: 'failed_on' })
        .first(),
      db('planned_work')
        .where({ ...renewed, renewed: true })
        .where('done_on', '<=', by)
        .max<{ on: string | null }>({ on: 'done_on' })
        .first(),
    ]);
    const days = [failure?.on, planned?.on].filter((day) => day != null).sort();
    const last = days.at(-1);
    if (last) return { on: last, standing: 'recorded' };
  }
  if (asset.itemFittedOn) return { on: asset.itemFittedOn, standing: 'recorded' };
  return {
    on: asset.inServiceOn,
    standing: asset.watchedFrom === asset.inServiceOn ? 'recorded' : 'assumed',
  };
}
