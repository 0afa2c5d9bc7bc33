import { z } from 'zod';
import type { Database } from '../../db/connection';
import type { PositionSort } from './position-sorts';
import type { SiteScope } from './sites.server';
import { timelineKinds, type Timeline } from '~/advice/timeline';

/** One asset of a class with what happened to it. */
export interface PositionRow {
  readonly id: string;
  readonly tag: string;
  readonly siteName: string;
  readonly quantity: number;
  readonly retiredOn: string | null;
  /** Failures that count: neither voided nor of an outside cause. */
  readonly failures: number;
  readonly plannedRenewals: number;
  readonly lastFailureOn: string | null;
  readonly timeline: Timeline;
}

const eventSchema = z.array(z.object({ day: z.string(), kind: z.enum(timelineKinds) }));
const rowSchema = z
  .object({
    id: z.string(),
    tag: z.string(),
    siteName: z.string(),
    quantity: z.number(),
    retiredOn: z.string().nullable(),
    failures: z.number(),
    plannedRenewals: z.number(),
    lastFailureOn: z.string().nullable(),
    from: z.string(),
    to: z.string(),
    events: eventSchema,
  })
  .transform(({ from, to, events, ...row }): PositionRow => ({ ...row, timeline: { from, to, events } }));

const sortColumn: Record<PositionSort, string> = {
  tag: '"tagOrder"',
  site: '"siteOrder"',
  failures: 'failures',
  renewals: '"plannedRenewals"',
  last: '"lastFailureOn"',
};

const columns = `
  a.id, a.tag, s.name as "siteName", a.quantity, a.retired_on as "retiredOn", a.watched_from as "from",
  least(:today::date, coalesce(a.watched_until, :today::date), coalesce(a.retired_on, :today::date)) as "to",
  (select count(*) from failures f where f.asset_id = a.id and f.voided_at is null and f.outside_cause is null) as failures,
  (select count(*) from planned_work w where w.asset_id = a.id and w.voided_at is null and w.renewed) as "plannedRenewals",
  (select max(f.failed_on) from failures f
    where f.asset_id = a.id and f.voided_at is null and f.outside_cause is null) as "lastFailureOn"`;

const events = `
  coalesce((select jsonb_agg(jsonb_build_object('day', e.day, 'kind', e.kind) order by e.day) from (
     select f.failed_on as day, case when f.outside_cause is not null then 'outside'
                                     when f.effect = 'renewed' then 'failure-renewed' else 'failure-patched' end as kind
       from failures f where f.asset_id = p.id and f.voided_at is null
     union all
     select w.done_on, case when w.renewed then 'renewal' else 'visit' end
       from planned_work w where w.asset_id = p.id and w.voided_at is null) e), '[]') as events`;

/** One page of a class's assets within the scope, each with its timeline. */
export async function listPositions(
  db: Database,
  scope: SiteScope,
  classId: string,
  {
    sort,
    direction,
    page,
    pageSize,
    today,
  }: {
    sort: PositionSort;
    direction: 'asc' | 'desc';
    page: number;
    pageSize: number;
    today: string;
  },
): Promise<{ rows: PositionRow[]; total: number }> {
  const inScope = scope === 'all' ? '' : 'and a.site_id = any(:siteIds)';
  const bindings = { classId, ...(scope === 'all' ? {} : { siteIds: [...scope] }) };
  const from = `from assets a join sites s on s.id = a.site_id where a.class_id = :classId ${inScope}`;
  const way = direction === 'asc' ? 'asc' : 'desc';
  const listed = await db.raw<{ rows: unknown[] }>(
    `select p.*, ${events} from (
       select * from (select ${columns}, lower(a.tag) as "tagOrder", lower(s.name) as "siteOrder" ${from}) x
        order by ${sortColumn[sort]} ${way} nulls last, "tagOrder"
        limit :limit offset :offset) p
      order by ${sortColumn[sort]} ${way} nulls last, "tagOrder"`,
    { ...bindings, today, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(`select count(*) as total ${from}`, bindings);
  return { rows: listed.rows.map((row) => rowSchema.parse(row)), total: counted.rows[0]?.total ?? 0 };
}

/** One asset with its timeline, whatever its site: the caller asks whether the person may see it. */
export async function findPosition(
  db: Database,
  assetId: string,
  today: string,
): Promise<PositionRow | undefined> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select p.*, ${events} from (
       select ${columns} from assets a join sites s on s.id = a.site_id where a.id = :assetId) p`,
    { assetId, today },
  );
  return rows[0] === undefined ? undefined : rowSchema.parse(rows[0]);
}
