import { z } from 'zod';
import type { CautionCode } from '~/advice/conclusion';
import { trends, type Trend } from '~/advice/trend';
import { verdicts, type Verdict } from '~/advice/verdict';
import type { Database } from '../../db/connection';
import type { ClassSortKey } from './class-sort';
import { listedSummarySchema, type ListedSummary } from './assessment-summary';

export interface ClassListFilter {
  /** Only classes with an asset at this site. */
  siteId?: string;
  verdict?: Verdict | 'not-assessed';
  statutory?: boolean;
  sort: ClassSortKey;
  direction: 'asc' | 'desc';
  /** From 1. */
  page: number;
  pageSize: number;
}

export interface ClassListRow {
  id: string;
  name: string;
  statutory: boolean;
  endangersPeople: boolean;
  /** Null before the first night that could compute the class. */
  assessment: {
    asOf: string;
    verdict: Verdict;
    trend: Trend;
    failures: number;
    cautionCodes: CautionCode[];
    summary: ListedSummary;
  } | null;
}

/** What each sort key orders by; the direction is put behind. Classes without the number come last. */
const orderBy: Record<ClassSortKey, string> = {
  attention: `case a.verdict when 'wear-out' then 5 when 'early-life' then 4 when 'undecided' then 3
                             when 'memoryless' then 2 else 1 end
              + case a.trend when 'rising' then 10 else 0 end`,
  name: 'lower(c.name)',
  verdict: `array_position(array['wear-out', 'early-life', 'undecided', 'memoryless'], a.verdict)`,
  trend: `array_position(array['rising', 'falling', 'unclear', 'level'], a.trend)`,
  failures: 'a.failures',
  recent: 'a.failures_last_year',
  mtbf: 'a.mean_time',
  slope: 'a.slope',
};

const rowSchema = z.object({
  id: z.string(),
  name: z.string(),
  statutory: z.boolean(),
  endangersPeople: z.boolean(),
  asOf: z.string().nullable(),
  verdict: z.enum(verdicts).nullable(),
  trend: z.enum(trends).nullable(),
  failures: z.number().nullable(),
  cautionCodes: z.array(z.string()).nullable(),
  summary: listedSummarySchema.nullable(),
});

/**
 * One page of the classes with the assessment in force.
 *
 * @param siteIds the sites the viewer may see; classes without an asset there are left out.
 */
export async function listClasses(
  db: Database,
  siteIds: readonly string[] | 'all',
  filter: ClassListFilter,
): Promise<{ rows: ClassListRow[]; total: number }> {
  const { where, bindings } = conditions(siteIds, filter);
  const from = `from asset_classes c
    left join class_standings a on a.class_id = c.id and a.assessment_id = c.current_assessment_id ${where}`;
  const direction = filter.direction === 'asc' ? 'asc' : 'desc';
  const page = await db.raw<{ rows: unknown[] }>(
    `select c.id, c.name, c.statutory, c.endangers_people as "endangersPeople",
            a.as_of as "asOf", a.verdict, a.trend, a.failures,
            a.caution_codes as "cautionCodes", a.summary
       ${from}
      order by ${orderBy[filter.sort]} ${direction} nulls last, a.failures desc nulls last, lower(c.name)
      limit :limit offset :offset`,
    { ...bindings, limit: filter.pageSize, offset: (filter.page - 1) * filter.pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(`select count(*) as total ${from}`, bindings);
  return { rows: page.rows.map(toRow), total: counted.rows[0]?.total ?? 0 };
}

function conditions(siteIds: readonly string[] | 'all', { siteId, verdict, statutory }: ClassListFilter) {
  const parts: string[] = [];
  const bindings: Record<string, string | string[] | boolean> = {};
  const hasAssetAt = (site: string) =>
    `exists (select from assets s where s.class_id = c.id and s.site_id = ${site})`;
  if (siteIds !== 'all') {
    parts.push(hasAssetAt('any(:siteIds)'));
    bindings.siteIds = [...siteIds];
  }
  if (siteId !== undefined) {
    parts.push(hasAssetAt(':siteId'));
    bindings.siteId = siteId;
  }
  if (verdict === 'not-assessed') parts.push('a.class_id is null');
  else if (verdict !== undefined) {
    parts.push('a.verdict = :verdict');
    bindings.verdict = verdict;
  }
  if (statutory !== undefined) {
    parts.push('c.statutory = :statutory');
    bindings.statutory = statutory;
  }
  return { where: parts.length === 0 ? '' : `where ${parts.join(' and ')}`, bindings };
}

function toRow(raw: unknown): ClassListRow {
  const { id, name, statutory, endangersPeople, ...rest } = rowSchema.parse(raw);
  const { asOf, verdict, trend, failures, cautionCodes, summary } = rest;
  const assessed = asOf !== null && verdict !== null && trend !== null && summary !== null;
  return {
    id,
    name,
    statutory,
    endangersPeople,
    assessment: assessed
      ? {
          asOf,
          verdict,
          trend,
          failures: failures ?? 0,
          cautionCodes: (cautionCodes ?? []) as CautionCode[],
          summary,
        }
      : null,
  };
}

export interface ClassHead {
  id: string;
  name: string;
  itemSingular: string;
  itemPlural: string;
  statutory: boolean;
  endangersPeople: boolean;
  /** The sites with an asset of the class, in order of name. */
  sites: { id: string; name: string }[];
}

/** One class's name and places; null when there is no such class or the viewer may see none of its sites. */
export async function readClassHead(
  db: Database,
  siteIds: readonly string[] | 'all',
  classId: string,
): Promise<ClassHead | null> {
  if (!z.uuid().safeParse(classId).success) return null;
  const { rows } = await db.raw<{ rows: ClassHead[] }>(
    `select c.id, c.name, c.item_singular as "itemSingular", c.item_plural as "itemPlural",
            c.statutory, c.endangers_people as "endangersPeople",
            coalesce((select json_agg(json_build_object('id', s.id, 'name', s.name) order by lower(s.name))
                        from sites s where exists (select from assets a where a.class_id = c.id and a.site_id = s.id)),
                     '[]') as sites
       from asset_classes c where c.id = ?`,
    [classId],
  );
  const head = rows[0];
  if (head === undefined) return null;
  if (siteIds === 'all') return head;
  const sites = head.sites.filter(({ id }) => siteIds.includes(id));
  return sites.length === 0 ? null : { ...head, sites };
}

/** Every class that a filter leaves, a batch at a time. */
export async function* everyClass(
  db: Database,
  siteIds: readonly string[] | 'all',
  filter: Omit<ClassListFilter, 'page' | 'pageSize'>,
): AsyncGenerator<ClassListRow> {
  const pageSize = 500;
  for (let page = 1; ; page += 1) {
    const { rows } = await listClasses(db, siteIds, { ...filter, page, pageSize });
    yield* rows;
    if (rows.length < pageSize) return;
  }
}
