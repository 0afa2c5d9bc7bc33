import type { Database } from '../../db/connection';
import { scheduleKeeping, type KeptAsset, type ScheduleKeeping } from '~/advice/schedule-keeping';
import { writeAudit } from './audit.server';
import { dayNumber } from './day-number';
import { findLastChange, type LastChange } from './last-change.server';
import type { TaskKind } from './task-kinds';

export interface MaintenanceTask {
  readonly id: string;
  readonly name: string;
  readonly kind: TaskKind;
  readonly intervalDays: number | null;
  readonly intervalHours: number | null;
  readonly statutoryReference: string | null;
  /** Integer minor units of one time; null when nobody has said. */
  readonly costMinor: number | null;
  readonly startsOn: string;
  readonly endsOn: string | null;
  /** What it took over from. */
  readonly replacesTaskId: string | null;
  /** How many assets it holds for alone; 0 for the whole class. */
  readonly assets: number;
  readonly version: number;
}

/** A class's tasks, those in force on a day first, the latest first within each. */
export async function listTasks(db: Database, classId: string, day: string): Promise<MaintenanceTask[]> {
  const { rows } = await db.raw<{ rows: MaintenanceTask[] }>(
    `select t.id, t.name, t.kind, t.interval_days as "intervalDays", t.interval_hours as "intervalHours",
            t.statutory_reference as "statutoryReference", t.cost_minor as "costMinor", t.starts_on as "startsOn",
            t.ends_on as "endsOn", t.replaces_task_id as "replacesTaskId", t.version,
            (select count(*) from maintenance_task_assets a where a.task_id = t.id) as assets
       from maintenance_tasks t
      where t.class_id = :classId
      order by t.ends_on is not null and t.ends_on <= :day, t.starts_on desc, lower(t.name), t.id`,
    { classId, day },
  );
  return rows;
}

/** What people say of a task. Its interval is set once; after that a change is put forward. */
export interface TaskEntry {
  readonly name: string;
  readonly kind: TaskKind;
  readonly intervalDays: number | null;
  readonly intervalHours: number | null;
  readonly statutoryReference: string | null;
  readonly costMinor: number | null;
  readonly startsOn: string;
}

export async function addTask(
  db: Database,
  { classId, task, personId }: { classId: string; task: TaskEntry; personId: string },
): Promise<string> {
  return db.transaction(async (trx) => {
    const [added] = (await trx('maintenance_tasks')
      .insert({
        class_id: classId,
        name: task.name,
        kind: task.kind,
        interval_days: task.intervalDays,
        interval_hours: task.intervalHours,
        statutory_reference: task.statutoryReference,
        cost_minor: task.costMinor,
        starts_on: task.startsOn,
      })
      .returning('id')) as { id: string }[];
    await writeAudit(trx, {
      personId,
      action: 'add',
      subject: 'maintenance-task',
      subjectId: added!.id,
      after: {
        classId,
        name: task.name,
        kind: task.kind,
        intervalDays: task.intervalDays,
        intervalHours: task.intervalHours,
        startsOn: task.startsOn,
      },
    });
    return added!.id;
  });
}

export type TaskResult =
  | { outcome: 'done' }
  | { outcome: 'no-such-task' }
  | { outcome: 'changed-meanwhile'; lastChange: LastChange | null };

interface TaskChange {
  classId: string;
  taskId: string;
  /** The version the person saw. */
  version: number;
  personId: string;
}

/** Changes what a task is called, what it costs and what asks for it. */
export async function describeTask(
  db: Database,
  change: TaskChange & Pick<TaskEntry, 'name' | 'statutoryReference' | 'costMinor'>,
): Promise<TaskResult> {
  const { name, statutoryReference, costMinor } = change;
  const columns = { name, statutory_reference: statutoryReference, cost_minor: costMinor };
  return changeTask(db, change, 'describe', columns);
}

/** Ends a task on a day, the first on which it no longer holds. */
export async function endTask(db: Database, change: TaskChange & { endsOn: string }): Promise<TaskResult> {
  return changeTask(db, change, 'end', { ends_on: change.endsOn });
}

async function changeTask(
  db: Database,
  { classId, taskId, version, personId }: TaskChange,
  action: string,
  columns: Record<string, string | number | null>,
): Promise<TaskResult> {
  return db.transaction(async (trx) => {
    const before = (await trx('maintenance_tasks')
      .where({ id: taskId, class_id: classId })
      .forUpdate()
      .first('version', ...Object.keys(columns))) as { version: number } | undefined;
    if (before === undefined) return { outcome: 'no-such-task' };
    if (before.version !== version) {
      const lastChange = await findLastChange(trx, { subject: 'maintenance-task', subjectId: taskId });
      return { outcome: 'changed-meanwhile', lastChange };
    }
    await trx('maintenance_tasks')
      .where('id', taskId)
      .update({ ...columns, version: version + 1, updated_at: trx.fn.now() });
    await writeAudit(trx, {
      personId,
      action,
      subject: 'maintenance-task',
      subjectId: taskId,
      before: Object.fromEntries(Object.entries(before).filter(([name]) => name !== 'version')),
      after: columns,
    });
    return { outcome: 'done' };
  });
}

interface KeepingRow {
  done: string[];
  renewedByFailure: string[];
  from: string;
  to: string;
}

/**
 * How well a task has been kept, from its planned work: that logged under it, or of its kind without a task named.
 * Null for a task that goes by the meter, whose due days nobody can tell from dates.
 *
 * @param today the day up to which it is looked at, left out.
 */
export async function readKeeping(
  db: Database,
  classId: string,
  task: MaintenanceTask,
  today: string,
): Promise<ScheduleKeeping | null> {
  if (task.intervalDays === null) return null;
  const { rows } = await db.raw<{ rows: KeepingRow[] }>(
    `select greatest(a.watched_from, :startsOn::date) as "from",
            least(:today::date, coalesce(:endsOn::date, 'infinity'), coalesce(a.watched_until, 'infinity'),
                  coalesce(a.retired_on, 'infinity')) as "to",
            array(select w.done_on::text from planned_work w
                   where w.asset_id = a.id and w.voided_at is null
                     and (w.task_id = :taskId or w.task_id is null and w.kind = :kind)
                   order by w.done_on) as done,
            array(select f.failed_on::text from failures f
                   where f.asset_id = a.id and f.voided_at is null and f.effect = 'renewed' and :renews
                   order by f.failed_on) as "renewedByFailure"
       from assets a
      where a.class_id = :classId and a.quantity = 1
        and (not exists (select from maintenance_task_assets p where p.task_id = :taskId)
             or exists (select from maintenance_task_assets p where p.task_id = :taskId and p.asset_id = a.id))`,
    {
      classId,
      taskId: task.id,
      kind: task.kind,
      renews: task.kind === 'replace' || task.kind === 'restore',
      startsOn: task.startsOn,
      endsOn: task.endsOn,
      today,
    },
  );
  const assets = rows
    .map(({ done, renewedByFailure, from, to }): KeptAsset => {
      const days = done.map(dayNumber);
      const starts = [...days, ...renewedByFailure.map(dayNumber)].sort((a, b) => a - b);
      return { done: days, starts, from: dayNumber(from), to: dayNumber(to) };
    })
    .filter(({ from, to }) => to > from);
  return scheduleKeeping(assets, task.intervalDays);
}
