import type { Database } from '../../db/connection';
import { writeAudit } from './audit.server';
import type { ChangeAction } from './schedule-change';

export interface MaintenanceTaskRow {
  id: string;
  classId: string;
  name: string;
  kind: 'replace' | 'restore' | 'inspect' | 'service' | 'test';
  intervalDays: number | null;
  intervalHours: number | null;
  statutoryReference: string | null;
  costMinor: number | null;
  startsOn: string;
  endsOn: string | null;
}

interface ChangeInEffect {
  id: string;
  classId: string;
  action: ChangeAction;
  taskId: string | null;
  /** Clock units of the class; null to stop. */
  to: number | null;
  assetIds: readonly string[];
}

/**
 * The schedule that renews a class's items on a day and holds for the whole class; the one that comes round most
 * often where there are several. Undefined where items run to failure.
 */
export async function findRenewingTask(
  db: Database,
  classId: string,
  day: string,
): Promise<MaintenanceTaskRow | undefined> {
  const { rows } = await db.raw<{ rows: MaintenanceTaskRow[] }>(
    `select ${taskColumns} from maintenance_tasks t
      where class_id = :classId and kind in ('replace', 'restore')
        and starts_on <= :day and (ends_on is null or ends_on > :day)
        and not exists (select from maintenance_task_assets a where a.task_id = t.id)
      order by coalesce(interval_days, interval_hours / 24), id limit 1`,
    { classId, day },
  );
  return rows[0];
}

const taskColumns = `t.id, t.class_id as "classId", t.name, t.kind, t.interval_days as "intervalDays",
  t.interval_hours as "intervalHours", t.statutory_reference as "statutoryReference",
  t.cost_minor as "costMinor", t.starts_on as "startsOn", t.ends_on as "endsOn"`;

/** Whether a task comes round as often as a number of clock units says; null stands for no task. */
export function isInterval(
  task: MaintenanceTaskRow | undefined,
  interval: number | null,
  clock: 'calendar-days' | 'operating-hours',
): boolean {
  if (task === undefined || interval === null) return task === undefined && interval === null;
  const ofTask = clock === 'calendar-days' ? task.intervalDays : task.intervalHours;
  // Of a task on the other clock the night knows the running hours a year; here it is taken as it is.
  return ofTask === null || Math.abs(ofTask - interval) < 0.01;
}

/** Whether a schedule of the whole class is to begin after a day. */
async function hasLaterTask(trx: Database, classId: string, day: string): Promise<boolean> {
  const { rows } = await trx.raw<{ rows: unknown[] }>(
    `select from maintenance_tasks t
      where class_id = :classId and kind in ('replace', 'restore') and starts_on > :day
        and not exists (select from maintenance_task_assets a where a.task_id = t.id) limit 1`,
    { classId, day },
  );
  return rows.length > 0;
}

export type EffectResult =
  | { outcome: 'done'; newTaskId: string | null }
  /** The schedule is no longer the one the change was put forward against. */
  | { outcome: 'schedule-changed' };

/**
 * Puts a change into the class's planned maintenance from a day on: the task it changes ends and a new one with the
 * new interval takes over; a trial's task holds for its assets alone, beside the class's own. Call it in the
 * transaction that approves.
 */
export async function putIntoEffect(
  trx: Database,
  change: ChangeInEffect,
  { day, personId }: { day: string; personId: string },
): Promise<EffectResult> {
  const task = change.taskId === null ? undefined : await lockTask(trx, change.taskId);
  const standing = await findRenewingTask(trx, change.classId, day);
  if (task?.id !== standing?.id || (task?.endsOn ?? null) !== null) return { outcome: 'schedule-changed' };
  if (change.action !== 'trial' && (await hasLaterTask(trx, change.classId, day))) {
    return { outcome: 'schedule-changed' };
  }

  if (task !== undefined && change.action !== 'trial') await endTask(trx, task, day, personId);
  if (change.to === null) return { outcome: 'done', newTaskId: null };
  const newTaskId = await addTask(trx, {
    ...(task ?? (await firstTask(trx, change.classId))),
    classId: change.classId,
    interval: change.to,
    replacesTaskId: change.action === 'trial' ? null : (task?.id ?? null),
    startsOn: day,
    personId,
  });
  if (change.action === 'trial') {
    await trx.raw(
      `insert into maintenance_task_assets (task_id, asset_id, class_id)
       select :newTaskId, id, class_id from assets where id = any(:assetIds)`,
      { newTaskId, assetIds: [...change.assetIds] },
    );
  }
  return { outcome: 'done', newTaskId };
}

/**
 * Takes a change out again from a day on: what it ended goes on as it was. Before the day it was to begin, it is as
 * if it had never been approved; so too on that very day, unless something was done under it.
 *
 * @returns 'taken-over' where the schedule has been changed again since: what it is now stays as it is.
 */
export async function takeOutOfEffect(
  trx: Database,
  change: ChangeInEffect & { newTaskId: string | null; takesEffectOn: string },
  { day, personId }: { day: string; personId: string },
): Promise<{ outcome: 'done' | 'taken-over' }> {
  const former = change.taskId === null ? undefined : await lockTask(trx, change.taskId);
  const current = change.newTaskId === null ? undefined : await lockTask(trx, change.newTaskId);
  if (await isTakenOver(trx, change, current, day)) return { outcome: 'taken-over' };
  const hasBegun =
    day > change.takesEffectOn || (current !== undefined && (await isReferredTo(trx, current)));
  const endsOn = current === undefined || !hasBegun ? day : await endTask(trx, current, day, personId);
  if (current !== undefined && !hasBegun) await dropTask(trx, change.id, current, personId);
  if (former === undefined || change.action === 'trial') return { outcome: 'done' };
  if (hasBegun) {
    await addTask(trx, {
      ...former,
      interval: null,
      replacesTaskId: current?.id ?? former.id,
      startsOn: endsOn,
      personId,
    });
    return { outcome: 'done' };
  }
  await trx('maintenance_tasks')
    .where('id', former.id)
    .update({ ends_on: null, version: trx.raw('version + 1'), updated_at: trx.fn.now() });
  await audit(trx, personId, 'reopen', former.id, { endsOn: former.endsOn }, { endsOn: null });
  return { outcome: 'done' };
}

/** Whether another schedule has taken the place of the one a change made. */
async function isTakenOver(
  trx: Database,
  { classId, action }: ChangeInEffect,
  current: MaintenanceTaskRow | undefined,
  day: string,
): Promise<boolean> {
  if (action === 'trial') return false;
  if (current !== undefined) return current.endsOn !== null;
  const standing = await findRenewingTask(trx, classId, day);
  return (standing !== undefined && standing.endsOn === null) || (await hasLaterTask(trx, classId, day));
}

/** Whether work was logged under a task or a change was put forward against it. */
async function isReferredTo(trx: Database, { id }: MaintenanceTaskRow): Promise<boolean> {
  const { rows } = await trx.raw<{ rows: unknown[] }>(
    `select from planned_work where task_id = :id union all select from schedule_changes where task_id = :id limit 1`,
    { id },
  );
  return rows.length > 0;
}

async function lockTask(trx: Database, taskId: string): Promise<MaintenanceTaskRow | undefined> {
  const { rows } = await trx.raw<{ rows: MaintenanceTaskRow[] }>(
    `select ${taskColumns} from maintenance_tasks t where id = ? for update`,
    [taskId],
  );
  return rows[0];
}

/**
 * A task that began on the very day lasts that day: an empty stretch of time is no task. One that has ended stays ended.
 *
 * @returns the first day on which it no longer holds.
 */
async function endTask(
  trx: Database,
  task: MaintenanceTaskRow,
  day: string,
  personId: string,
): Promise<string> {
  if (task.endsOn !== null && task.endsOn <= day) return task.endsOn;
  const [ended] = (await trx('maintenance_tasks')
    .where('id', task.id)
    .update({
      ends_on: trx.raw('greatest(?::date, starts_on + 1)', [day]),
      version: trx.raw('version + 1'),
      updated_at: trx.fn.now(),
    })
    .returning('ends_on')) as { ends_on: string }[];
  const endsOn = ended!.ends_on;
  await audit(trx, personId, 'end', task.id, { endsOn: task.endsOn }, { endsOn });
  return endsOn;
}

/** A task that never began leaves no trace but in the audit trail. */
async function dropTask(
  trx: Database,
  changeId: string,
  task: MaintenanceTaskRow,
  personId: string,
): Promise<void> {
  await trx('schedule_changes').where('id', changeId).update({ new_task_id: null });
  await trx('maintenance_task_assets').where('task_id', task.id).delete();
  await trx('maintenance_tasks').where('id', task.id).delete();
  await audit(trx, personId, 'drop', task.id, task, undefined);
}

interface NewTask extends Omit<MaintenanceTaskRow, 'id' | 'intervalDays' | 'intervalHours' | 'endsOn'> {
  intervalDays?: number | null;
  intervalHours?: number | null;
  /** Clock units of the class; null keeps the days or hours given. */
  interval: number | null;
  replacesTaskId: string | null;
  personId: string;
}

async function addTask(trx: Database, task: NewTask): Promise<string> {
  const { rows } = await trx.raw<{ rows: { clock: string }[] }>(
    `select clock from asset_classes where id = ?`,
    [task.classId],
  );
  const onHours = rows[0]?.clock === 'operating-hours';
  const interval =
    task.interval === null
      ? { interval_days: task.intervalDays, interval_hours: task.intervalHours }
      : onHours
        ? { interval_days: null, interval_hours: task.interval }
        : { interval_days: Math.max(1, Math.round(task.interval)), interval_hours: null };
  const row = {
    class_id: task.classId,
    name: task.name,
    kind: task.kind,
    ...interval,
    statutory_reference: task.statutoryReference,
    cost_minor: task.costMinor,
    starts_on: task.startsOn,
    replaces_task_id: task.replacesTaskId,
  };
  const [added] = (await trx('maintenance_tasks').insert(row).returning('id')) as { id: string }[];
  await audit(trx, task.personId, 'start', added!.id, undefined, row);
  return added!.id;
}

/** What the first schedule of a class is called. */
async function firstTask(
  trx: Database,
  classId: string,
): Promise<Pick<MaintenanceTaskRow, 'name' | 'kind' | 'statutoryReference' | 'costMinor'>> {
  const { rows } = await trx.raw<{ rows: { itemSingular: string }[] }>(
    `select item_singular as "itemSingular" from asset_classes where id = ?`,
    [classId],
  );
  const item = rows[0]?.itemSingular ?? '';
  return {
    name: `${item.charAt(0).toUpperCase()}${item.slice(1)} replacement`,
    kind: 'replace',
    statutoryReference: null,
    costMinor: null,
  };
}

function audit(
  trx: Database,
  personId: string,
  action: string,
  taskId: string,
  before: unknown,
  after: unknown,
): Promise<void> {
  return writeAudit(trx, { personId, action, subject: 'maintenance-task', subjectId: taskId, before, after });
}
