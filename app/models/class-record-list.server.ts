import type { Database } from '../../db/connection';
import type { ClassRecordSort } from './class-record-sorts';

export interface ClassRecordRow {
  id: string;
  kind: 'failure' | 'planned-work';
  day: string;
  at: Date | null;
  tag: string;
  siteName: string;
  /** The failure mode, or the kind of planned work. */
  what: string | null;
  renewed: boolean;
  outsideCause: string | null;
  itemFittedOn: string | null;
  note: string | null;
  voidReason: string | null;
  loggedBy: string | null;
  importId: string | null;
}

/** Which records to show; days are 'YYYY-MM-DD', both taken in. */
export interface ClassRecordFilter {
  kind?: ClassRecordRow['kind'];
  siteId?: string;
  from?: string;
  to?: string;
  /** Voided ones alone, or those that count alone. */
  voided?: 'yes' | 'no';
}

export interface ClassRecordOrder {
  sort: ClassRecordSort;
  direction: 'asc' | 'desc';
  /** From 1. */
  page: number;
  pageSize: number;
}

const orderBy: Record<ClassRecordSort, string> = { day: 'r.day', tag: 'lower(a.tag)', logged: 'r.logged_at' };

const failures = `
  select f.id, 'failure' as kind, f.failed_on as day, f.failed_at as at, f.asset_id, m.name as what,
         f.effect = 'renewed' as renewed, f.outside_cause, f.item_fitted_on, f.note, f.void_reason,
         f.logged_by, f.import_id, f.logged_at
    from failures f left join failure_modes m on m.id = f.mode_id
   where f.class_id = :classId`;
const plannedWork = `
  select w.id, 'planned-work' as kind, w.done_on as day, w.done_at as at, w.asset_id, w.kind as what,
         w.renewed, null as outside_cause, w.item_fitted_on, w.note, w.void_reason,
         w.logged_by, w.import_id, w.logged_at
    from planned_work w
   where w.class_id = :classId`;

/** One page of a class's failures and planned work within the viewer's sites, voided ones too unless said otherwise. */
export async function listClassRecords(
  db: Database,
  siteIds: readonly string[] | 'all',
  classId: string,
  filter: ClassRecordFilter,
  { sort, direction, page, pageSize }: ClassRecordOrder,
): Promise<{ rows: ClassRecordRow[]; total: number }> {
  const { from, bindings } = matching(siteIds, classId, filter);
  const { rows } = await db.raw<{ rows: ClassRecordRow[] }>(
    `select r.id, r.kind, r.day, r.at, a.tag, s.name as "siteName", r.what, r.renewed,
            r.outside_cause as "outsideCause", r.item_fitted_on as "itemFittedOn", r.note,
            r.void_reason as "voidReason", r.import_id as "importId",
            (select p.name from people p where p.id = r.logged_by) as "loggedBy"
       ${from}
      order by ${orderBy[sort]} ${direction === 'asc' ? 'asc' : 'desc'}, r.day desc, r.logged_at desc, r.id
      limit :limit offset :offset`,
    { ...bindings, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(`select count(*) as total ${from}`, bindings);
  return { rows, total: counted.rows[0]?.total ?? 0 };
}

/** Every record that a filter leaves, a batch at a time. */
export async function* everyClassRecord(
  db: Database,
  siteIds: readonly string[] | 'all',
  classId: string,
  filter: ClassRecordFilter,
  order: Pick<ClassRecordOrder, 'sort' | 'direction'>,
): AsyncGenerator<ClassRecordRow> {
  const pageSize = 2000;
  for (let page = 1; ; page += 1) {
    const { rows } = await listClassRecords(db, siteIds, classId, filter, { ...order, page, pageSize });
    yield* rows;
    if (rows.length < pageSize) return;
  }
}

function matching(
  siteIds: readonly string[] | 'all',
  classId: string,
  { kind, siteId, from, to, voided }: ClassRecordFilter,
) {
  const sources = { failure: failures, 'planned-work': plannedWork };
  const records = `(${kind === undefined ? `${failures} union all ${plannedWork}` : sources[kind]}) r`;
  const conditions: string[] = [];
  const bindings: Record<string, string | string[]> = { classId };
  const add = (condition: string, name: string, value: string | string[]) => {
    conditions.push(condition);
    bindings[name] = value;
  };
  if (siteIds !== 'all') add('a.site_id = any(:siteIds)', 'siteIds', [...siteIds]);
  if (siteId) add('a.site_id = :siteId', 'siteId', siteId);
  if (from) add('r.day >= :from', 'from', from);
  if (to) add('r.day <= :to', 'to', to);
  if (voided) conditions.push(`r.void_reason is ${voided === 'yes' ? 'not ' : ''}null`);
  const where = conditions.length === 0 ? '' : `where ${conditions.join(' and ')}`;
  return {
    from: `from ${records} join assets a on a.id = r.asset_id join sites s on s.id = a.site_id ${where}`,
    bindings,
  };
}
