import { z } from 'zod';
import type { Database } from '../../db/connection';
import type { MonthsAhead, YearAheadSort } from './year-ahead-sorts';

export interface YearAheadFilter {
  months: MonthsAhead;
  /** A row a class, or a row a class and site. */
  by: 'class' | 'site';
  /** With this site alone; rows are then of the site. */
  siteId?: string;
}

export interface YearAheadRow {
  classId: string;
  className: string;
  itemPlural: string;
  /** Null for a row of the whole class. */
  siteName: string | null;
  positions: number;
  mean: number;
  low: number;
  high: number;
  /** Null where no lead time of spares is given. */
  spares: number | null;
  leadTimeDays: number | null;
  /** What the failures expected cost, integer minor units; null where nobody has said what one costs. */
  costMinor: number | null;
}

const rowSchema = z.object({
  classId: z.string(),
  className: z.string(),
  itemPlural: z.string(),
  siteName: z.string().nullable(),
  positions: z.number(),
  mean: z.number(),
  low: z.number(),
  high: z.number(),
  spares: z.number().nullable(),
  leadTimeDays: z.number().nullable(),
  costMinor: z.number().nullable(),
});

const orderBy: Record<YearAheadSort, string> = {
  class: 'lower("className")',
  site: 'lower("siteName")',
  positions: 'positions',
  expected: 'mean',
  spares: 'spares',
  cost: '"costMinor"',
};

function rowsOf({ months, by, siteId }: YearAheadFilter) {
  const ofSite = by === 'site' || siteId !== undefined;
  const conditions = [`o.months = ${months}`, ofSite ? 'o.site_id is not null' : 'o.site_id is null'];
  if (siteId !== undefined) conditions.push('o.site_id = :siteId::uuid');
  return {
    sql: `
      select c.id as "classId", c.name as "className", c.item_plural as "itemPlural", s.name as "siteName",
             o.positions, o.mean, o.low, o.high, o.spares, c.spares_lead_time_days as "leadTimeDays",
             round((o.mean * c.failure_cost_minor)::numeric)::bigint as "costMinor"
        from class_outlooks o
        join class_standings st on st.class_id = o.class_id
        join asset_classes c on c.id = o.class_id and c.current_assessment_id = st.assessment_id
        left join sites s on s.id = o.site_id
       where ${conditions.join(' and ')}`,
    bindings: siteId === undefined ? {} : { siteId },
  };
}

/** One page of what is to come, as of the night in force of each class. */
export async function listYearAhead(
  db: Database,
  filter: YearAheadFilter,
  order: { sort: YearAheadSort; direction: 'asc' | 'desc'; page: number; pageSize: number },
): Promise<{ rows: YearAheadRow[]; total: number; sum: YearAheadSum }> {
  const { sql, bindings } = rowsOf(filter);
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select * from (${sql}) rows
      order by ${orderBy[order.sort]} ${order.direction === 'asc' ? 'asc' : 'desc'} nulls last, lower("className"),
               lower("siteName")
      limit :limit offset :offset`,
    { ...bindings, limit: order.pageSize, offset: (order.page - 1) * order.pageSize },
  );
  const counted = await db.raw<{ rows: unknown[] }>(
    `select count(*) as total, coalesce(sum(mean), 0) as mean, coalesce(sum(power(high - low, 2)), 0)::float8 as spread,
            sum("costMinor")::bigint as "costMinor", count(*) filter (where "costMinor" is null) as "withoutCost"
       from (${sql}) rows`,
    bindings,
  );
  const sums = sumSchema.parse(counted.rows[0]);
  const half = Math.sqrt(sums.spread) / 2;
  return {
    rows: rows.map((row) => rowSchema.parse(row)),
    total: sums.total,
    sum: {
      mean: sums.mean,
      low: Math.max(0, sums.mean - half),
      high: sums.mean + half,
      costMinor: sums.costMinor,
      withoutCost: sums.withoutCost,
    },
  };
}

const sumSchema = z.object({
  total: z.number(),
  mean: z.number(),
  spread: z.number(),
  costMinor: z.number().nullable(),
  withoutCost: z.number(),
});

/**
 * All rows of a filter together. Means add up. Ranges do not: rows that fail independently of each other have a range
 * as wide as the root of their widths squared and added (normal approximation, from memory).
 */
export interface YearAheadSum {
  mean: number;
  low: number;
  high: number;
  costMinor: number | null;
  /** Rows whose class has no cost of a failure. */
  withoutCost: number;
}

/** Every row of a filter, a batch at a time. */
export async function* everyYearAhead(
  db: Database,
  filter: YearAheadFilter,
  order: { sort: YearAheadSort; direction: 'asc' | 'desc' },
): AsyncGenerator<YearAheadRow> {
  const pageSize = 1000;
  for (let page = 1; ; page += 1) {
    const { rows } = await listYearAhead(db, filter, { ...order, page, pageSize });
    yield* rows;
    if (rows.length < pageSize) return;
  }
}
