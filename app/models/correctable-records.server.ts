import type { Database } from '../../db/connection';
import type { CorrectableSort } from './correctable-sorts';
import type { Effect, OutsideCause } from './failure';
import type { SeenRecord } from './correction-plan.server';

/** Which of a class's failures to show; all of it is optional. Days are 'YYYY-MM-DD', both taken in. */
export interface CorrectableFilter {
  readonly siteId?: string;
  /** A mode's id, or `none` for failures without one. */
  readonly mode?: string;
  readonly effect?: Effect;
  readonly outside?: 'yes' | 'no';
  readonly voided?: 'yes' | 'all';
  readonly from?: string;
  readonly to?: string;
  /** Part of a tag, in any case. */
  readonly tag?: string;
}

export interface CorrectableRow {
  readonly id: string;
  readonly version: number;
  readonly failedOn: string;
  readonly failedAt: Date | null;
  readonly tag: string;
  readonly siteName: string;
  readonly modeName: string | null;
  readonly effect: Effect;
  readonly outsideCause: OutsideCause | null;
  readonly itemFittedOn: string | null;
  readonly itemAge: number | null;
  readonly note: string | null;
  readonly voidReason: string | null;
  readonly loggedByName: string | null;
}

function conditions(classId: string, filter: CorrectableFilter) {
  const parts = ['f.class_id = :classId'];
  const bindings: Record<string, string> = { classId };
  const add = (condition: string, name: string, value: string) => {
    parts.push(condition);
    bindings[name] = value;
  };
  const { siteId, mode, effect, outside, voided, from, to, tag } = filter;
  if (siteId) add('a.site_id = :siteId', 'siteId', siteId);
  if (mode === 'none') parts.push('f.mode_id is null');
  else if (mode) add('f.mode_id = :mode', 'mode', mode);
  if (effect) add('f.effect = :effect', 'effect', effect);
  if (outside) parts.push(`f.outside_cause is ${outside === 'yes' ? 'not ' : ''}null`);
  if (voided === 'yes') parts.push('f.voided_at is not null');
  else if (voided !== 'all') parts.push('f.voided_at is null');
  if (from) add('f.failed_on >= :from', 'from', from);
  if (to) add('f.failed_on <= :to', 'to', to);
  if (tag) add(`a.tag ilike '%' || :tag || '%'`, 'tag', tag.replace(/[\\%_]/g, '\\$&'));
  return { where: `where ${parts.join(' and ')}`, bindings };
}

const orderBy: Record<CorrectableSort, string> = {
  day: 'f.failed_on',
  tag: 'lower(a.tag)',
  mode: 'lower(m.name)',
  fitted: 'f.item_fitted_on',
  logged: 'f.logged_at',
};

const tables = `failures f join assets a on a.id = f.asset_id join sites s on s.id = a.site_id
  left join failure_modes m on m.id = f.mode_id left join people p on p.id = f.logged_by`;

/** One page of a class's failures that match a filter. */
export async function listCorrectable(
  db: Database,
  classId: string,
  filter: CorrectableFilter,
  {
    sort,
    direction,
    page,
    pageSize,
  }: { sort: CorrectableSort; direction: 'asc' | 'desc'; page: number; pageSize: number },
): Promise<{ rows: CorrectableRow[]; total: number }> {
  const { where, bindings } = conditions(classId, filter);
  const { rows } = await db.raw<{ rows: CorrectableRow[] }>(
    `select f.id, f.version, f.failed_on as "failedOn", f.failed_at as "failedAt", a.tag, s.name as "siteName",
            m.name as "modeName", f.effect, f.outside_cause as "outsideCause", f.item_fitted_on as "itemFittedOn",
            f.item_age as "itemAge", f.note, f.void_reason as "voidReason", p.name as "loggedByName"
       from ${tables} ${where}
      order by ${orderBy[sort]} ${direction === 'asc' ? 'asc' : 'desc'} nulls last, f.failed_on desc, f.id
      limit :limit offset :offset`,
    { ...bindings, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(
    `select count(*) as total from ${tables} ${where}`,
    bindings,
  );
  return { rows, total: counted.rows[0]?.total ?? 0 };
}

/** Every failure that matches a filter, as it stands now; one more than `most` tells that there are too many. */
export async function everyCorrectable(
  db: Database,
  classId: string,
  filter: CorrectableFilter,
  most: number,
): Promise<SeenRecord[]> {
  const { where, bindings } = conditions(classId, filter);
  const { rows } = await db.raw<{ rows: SeenRecord[] }>(
    `select f.id, f.version from ${tables} ${where} order by f.id limit :limit`,
    { ...bindings, limit: most + 1 },
  );
  return rows;
}

/** Some failures of a class as they stand now; ids that are no failure of it are passed over. */
export async function seenNow(db: Database, classId: string, ids: readonly string[]): Promise<SeenRecord[]> {
  const { rows } = await db.raw<{ rows: SeenRecord[] }>(
    `select id, version from failures where class_id = :classId and id = any(:ids::uuid[]) order by id`,
    { classId, ids: [...ids] },
  );
  return rows;
}
