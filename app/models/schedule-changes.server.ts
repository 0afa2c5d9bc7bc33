import { z } from 'zod';
import { conclusionSchema } from '~/advice/conclusion';
import { findingsSchema } from '~/advice/findings';
import { followUpSchema } from '~/advice/follow-up';
import type { Database } from '../../db/connection';
import {
  changeActions,
  changeStates,
  openStates,
  type Change,
  type ChangeGroup,
  type ChangeRow,
  type ChangeSort,
  type ChangeState,
  type ChangeStep,
} from './schedule-change';

export interface ChangeListFilter {
  /** Waiting for somebody, waiting for a decision, in effect and followed, or past. */
  group?: ChangeGroup;
  classId?: string;
  /** Only of classes with an asset at this site. */
  siteId?: string;
  /** By state unless given, those that wait first. */
  sort?: ChangeSort;
  direction?: 'asc' | 'desc';
}

const statesOf: Record<ChangeGroup, readonly ChangeState[]> = {
  open: openStates,
  'to-decide': ['put-forward'],
  followed: ['approved'],
  past: ['declined', 'withdrawn', 'taken-back'],
};

const columns = `
  x.id, x.class_id as "classId", c.name as "className", c.item_plural as "itemPlural", c.clock,
  c.statutory or c.endangers_people as "isMarked", x.action, x.state, x.origin, x.reason,
  x.from_interval::float8 as "from", x.to_interval::float8 as "to",
  x.saving_per_year_minor as "savingValue", x.saving_low_minor as "savingLow", x.saving_high_minor as "savingHigh",
  x.saving_share as share, x.put_forward_by as "putForwardById", p.name as "putForwardByName",
  x.put_forward_at as "putForwardAt", d.name as "decidedByName", x.decided_at as "decidedAt",
  x.takes_effect_on as "takesEffectOn", x.taken_back_on as "takenBackOn", x.task_id as "taskId",
  x.new_task_id as "newTaskId", x.follow_up as "followUp", x.follow_up_as_of as "followUpAsOf", x.version,
  (select count(*) from schedule_change_assets a where a.change_id = x.id) as assets`;
const tables = `schedule_changes x join asset_classes c on c.id = x.class_id
  join people p on p.id = x.put_forward_by left join people d on d.id = x.decided_by`;

const rowSchema = z
  .object({
    id: z.string(),
    classId: z.string(),
    className: z.string(),
    itemPlural: z.string(),
    clock: z.enum(['calendar-days', 'operating-hours']),
    isMarked: z.boolean(),
    action: z.enum(changeActions),
    state: z.enum(changeStates),
    origin: z.enum(['proposal', 'by-hand']),
    reason: z.string(),
    from: z.number().nullable(),
    to: z.number().nullable(),
    savingValue: z.number().nullable(),
    savingLow: z.number().nullable(),
    savingHigh: z.number().nullable(),
    share: z.number().nullable(),
    putForwardById: z.string(),
    putForwardByName: z.string(),
    putForwardAt: z.date(),
    decidedByName: z.string().nullable(),
    decidedAt: z.date().nullable(),
    takesEffectOn: z.string().nullable(),
    takenBackOn: z.string().nullable(),
    taskId: z.string().nullable(),
    newTaskId: z.string().nullable(),
    followUp: followUpSchema.nullable(),
    followUpAsOf: z.string().nullable(),
    version: z.number(),
    assets: z.number(),
  })
  .transform(({ savingValue, savingLow, savingHigh, ...row }) => ({
    ...row,
    saving: savingValue === null ? null : { value: savingValue, low: savingLow ?? 0, high: savingHigh ?? 0 },
  }));

const orderBy: Record<ChangeSort, string> = {
  state: `case when x.state in ('put-forward', 'asked-back') then 0 when x.state = 'approved' then 1 else 2 end`,
  class: 'lower(c.name)',
  saving: 'x.saving_per_year_minor',
  'put-forward': 'x.put_forward_at',
};

/** One page of the changes; the latest first among equals. */
export async function listChanges(
  db: Database,
  filter: ChangeListFilter & { /** From 1. */ page: number; pageSize: number },
): Promise<{ rows: ChangeRow[]; total: number }> {
  const { sort = 'state', direction = 'asc', page, pageSize } = filter;
  const { where, bindings } = conditionsOf(filter);
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select ${columns} from ${tables} ${where}
      order by ${orderBy[sort]} ${direction === 'asc' ? 'asc' : 'desc'} nulls last,
               x.put_forward_at desc, x.id
      limit :limit offset :offset`,
    { ...bindings, limit: pageSize, offset: (page - 1) * pageSize },
  );
  const counted = await db.raw<{ rows: { total: number }[] }>(
    `select count(*) as total from schedule_changes x ${where}`,
    bindings,
  );
  return { rows: rows.map((row) => rowSchema.parse(row)), total: counted.rows[0]?.total ?? 0 };
}

/** Every change of a filter, a batch at a time. */
export async function* everyChange(db: Database, filter: ChangeListFilter): AsyncGenerator<ChangeRow> {
  const pageSize = 500;
  for (let page = 1; ; page += 1) {
    const { rows } = await listChanges(db, { ...filter, page, pageSize });
    yield* rows;
    if (rows.length < pageSize) return;
  }
}

function conditionsOf({ group, classId, siteId }: ChangeListFilter) {
  const conditions: string[] = [];
  if (group) conditions.push('x.state = any(:states)');
  if (classId) conditions.push('x.class_id = :classId');
  if (siteId)
    conditions.push('exists (select from assets s where s.class_id = x.class_id and s.site_id = :siteId)');
  return {
    where: conditions.length === 0 ? '' : `where ${conditions.join(' and ')}`,
    bindings: {
      ...(group ? { states: [...statesOf[group]] } : {}),
      ...(classId ? { classId } : {}),
      ...(siteId ? { siteId } : {}),
    },
  };
}

const evidenceSchema = z.object({ findings: findingsSchema, conclusion: conclusionSchema });

/** A change with its conversation and what it rested on; undefined where there is none. */
export async function findChange(db: Database, changeId: string): Promise<Change | undefined> {
  const { rows } = await db.raw<{ rows: { evidence: unknown; evidenceAsOf: string }[] }>(
    `select ${columns}, x.evidence, x.evidence_as_of as "evidenceAsOf" from ${tables} where x.id = ?`,
    [changeId],
  );
  const row = rows[0];
  if (row === undefined) return undefined;
  const steps = await db.raw<{ rows: ChangeStep[] }>(
    `select s.step, s.words, p.name as "personName", s.at
       from schedule_change_steps s join people p on p.id = s.person_id
      where s.change_id = ? order by s.id`,
    [changeId],
  );
  const part = await db.raw<{ rows: { id: string; tag: string; siteName: string }[] }>(
    `select a.id, a.tag, s.name as "siteName"
       from schedule_change_assets x join assets a on a.id = x.asset_id join sites s on s.id = a.site_id
      where x.change_id = ? order by a.tag`,
    [changeId],
  );
  const { evidence, evidenceAsOf, ...rest } = row;
  return {
    ...rowSchema.parse(rest),
    steps: steps.rows,
    part: part.rows,
    evidence: { asOf: evidenceAsOf, ...evidenceSchema.parse(evidence) },
  };
}

/** The change of a class that waits for somebody, if there is one. */
export async function findOpenChange(db: Database, classId: string): Promise<string | undefined> {
  const row = (await db('schedule_changes')
    .where('class_id', classId)
    .whereIn('state', [...openStates])
    .first('id')) as { id: string } | undefined;
  return row?.id;
}

export type LockedChange = z.output<typeof rowSchema>;

/** A change as it stands, held against others until the transaction ends. */
export async function lockChange(trx: Database, changeId: string): Promise<LockedChange | undefined> {
  await trx('schedule_changes').where('id', changeId).forUpdate().select('id');
  const { rows } = await trx.raw<{ rows: unknown[] }>(`select ${columns} from ${tables} where x.id = ?`, [
    changeId,
  ]);
  return rows[0] === undefined ? undefined : rowSchema.parse(rows[0]);
}
