import type { Knex } from 'knex';
import type { Database } from '../../db/connection';
import type { Failure } from './failure';
import type { SiteScope } from './sites.server';

/** One failure by id, voided or not, whatever its site: the caller asks whether the person may see it. */
export async function findFailure(db: Database, failureId: string): Promise<Failure | undefined> {
  return failuresQuery(db).where('failures.id', failureId).first();
}

export interface FailureFilter {
  readonly scope?: SiteScope;
  readonly classId?: string;
  readonly assetId?: string;
  /** Voided ones too; they are left out otherwise. */
  readonly voided?: boolean;
}

/** One page of failures, the latest first; `page` starts at 1. */
export async function listFailures(
  db: Database,
  filter: FailureFilter & { page?: number; perPage?: number },
): Promise<{ failures: Failure[]; total: number }> {
  const { page = 1, perPage = 50 } = filter;
  const [failures, counted] = await Promise.all([
    narrow(failuresQuery(db), filter)
      .orderBy([
        { column: 'failures.failed_on', order: 'desc' },
        { column: 'failures.logged_at', order: 'desc' },
        { column: 'failures.id', order: 'desc' },
      ])
      .limit(perPage)
      .offset((page - 1) * perPage),
    narrow(db('failures').join('assets', 'assets.id', 'failures.asset_id'), filter).count<
      { total: number }[]
    >({
      total: 'failures.id',
    }),
  ]);
  return { failures, total: Number(counted[0]?.total ?? 0) };
}

function narrow<Query extends Knex.QueryBuilder>(query: Query, filter: FailureFilter): Query {
  if (filter.scope && filter.scope !== 'all') query.whereIn('assets.site_id', [...filter.scope]);
  if (filter.classId) query.where('failures.class_id', filter.classId);
  if (filter.assetId) query.where('failures.asset_id', filter.assetId);
  if (!filter.voided) query.whereNull('failures.voided_at');
  return query;
}

/** Failures with the names a reader needs, for the caller to narrow and order. */
export function failuresQuery(db: Database): Knex.QueryBuilder<object, Failure[]> {
  return db('failures')
    .join('assets', 'assets.id', 'failures.asset_id')
    .join('asset_classes', 'asset_classes.id', 'failures.class_id')
    .join('sites', 'sites.id', 'assets.site_id')
    .leftJoin('areas', 'areas.id', 'assets.area_id')
    .leftJoin('failure_modes', 'failure_modes.id', 'failures.mode_id')
    .leftJoin({ logger: 'people' }, 'logger.id', 'failures.logged_by')
    .leftJoin({ voider: 'people' }, 'voider.id', 'failures.voided_by')
    .select<Failure[]>({
      id: 'failures.id',
      assetId: 'failures.asset_id',
      tag: 'assets.tag',
      quantity: 'assets.quantity',
      classId: 'failures.class_id',
      className: 'asset_classes.name',
      itemSingular: 'asset_classes.item_singular',
      clock: 'asset_classes.clock',
      siteId: 'assets.site_id',
      siteName: 'sites.name',
      areaName: 'areas.name',
      failedOn: 'failures.failed_on',
      failedAt: 'failures.failed_at',
      modeId: 'failures.mode_id',
      modeName: 'failure_modes.name',
      effect: 'failures.effect',
      outsideCause: 'failures.outside_cause',
      itemFittedOn: 'failures.item_fitted_on',
      itemAge: 'failures.item_age',
      note: 'failures.note',
      loggedAt: 'failures.logged_at',
      loggedById: 'failures.logged_by',
      loggedByName: 'logger.name',
      voidedAt: 'failures.voided_at',
      voidedById: 'failures.voided_by',
      voidedByName: 'voider.name',
      voidReason: 'failures.void_reason',
      version: 'failures.version',
    });
}
