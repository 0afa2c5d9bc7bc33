import type { ClockKind } from '~/advice/class-evidence';
import type { Database } from '../../db/connection';

export interface ClassRow {
  id: string;
  itemSingular: string;
  itemPlural: string;
  clock: ClockKind;
  statutory: boolean;
  endangersPeople: boolean;
  hiddenFailures: boolean;
  plannedCostMinor: number | null;
  failureCostMinor: number | null;
  groupPlannedCostMinor: number | null;
  sparesLeadTimeDays: number | null;
  requiredAvailability: number | null;
}

export interface AssetRow {
  id: string;
  tag: string;
  siteId: string;
  siteName: string;
  quantity: number;
  inServiceOn: string;
  watchedFrom: string;
  watchedUntil: string | null;
  retiredOn: string | null;
  itemFittedOn: string | null;
  dutyHoursPerDay: number | null;
}

export interface RecordRow {
  assetId: string;
  day: string;
  /** Share of the local day gone by, null when only the day is known. */
  timeOfDay: number | null;
  source: 'failure' | 'planned-work';
  renewed: boolean;
  modeId: string | null;
  outsideCause: string | null;
  itemFittedOn: string | null;
  itemAge: number | null;
  /** Of a quantity asset, how many items a planned renewal took; null for all. */
  items: number | null;
  voided: boolean;
}

export interface ReadingRow {
  assetId: string;
  day: string;
  hours: number;
  meterChanged: boolean;
}

export interface FittedRow {
  assetId: string;
  fittedOn: string;
  count: number;
}

/** The replacing or restoring task in force; its interval in days or hours. */
export interface TaskRow {
  name: string;
  intervalDays: number | null;
  intervalHours: number | null;
}

/** One class with all its records, as the database has them. */
export interface ClassRecords {
  assetClass: ClassRow;
  assets: AssetRow[];
  records: RecordRow[];
  readings: ReadingRow[];
  fitted: FittedRow[];
  modes: { id: string; name: string }[];
  /** Null where no schedule renews the items. */
  renewalTask: TaskRow | null;
}

/** Every class, in a fixed order. */
export async function listClassIds(db: Database): Promise<string[]> {
  const { rows } = await db.raw<{ rows: { id: string }[] }>(`select id from asset_classes order by id`);
  return rows.map(({ id }) => id);
}

interface ReadOptions {
  /** Of the organisation: decides where in its day a moment lies. */
  timeZone: string;
  /** The day whose maintenance tasks are in force, 'YYYY-MM-DD'. */
  asOf: string;
}

/**
 * Reads one class with all its records.
 *
 * @throws Error when there is no such class.
 */
export async function readClassRecords(
  db: Database,
  classId: string,
  options: ReadOptions,
): Promise<ClassRecords> {
  const [records] = await readRecordsOfClasses(db, [classId], options);
  return records!;
}

/**
 * Reads some classes with all their records, one query a table for all of them. It holds all it reads in
 * memory.
 *
 * @returns the classes in the order asked.
 * @throws Error when there is no such class.
 */
export async function readRecordsOfClasses(
  db: Database,
  classIds: readonly string[],
  { timeZone, asOf }: ReadOptions,
): Promise<ClassRecords[]> {
  const ids = [...classIds];
  const classes = new Map((await readClasses(db, ids)).map((row) => [row.id, row]));
  const assets = byClass(await readAssets(db, ids));
  const records = byClass(await readRecords(db, ids, timeZone));
  const onHours = ids.filter((id) => classes.get(id)?.clock === 'operating-hours');
  const readings = byClass(onHours.length === 0 ? [] : await readReadings(db, onHours));
  const fitted = byClass(await readFitted(db, ids));
  const modes = byClass(await readModes(db, ids));
  const tasks = byClass(await readRenewalTasks(db, ids, asOf));
  return ids.map((id) => {
    const assetClass = classes.get(id);
    if (assetClass === undefined) throw new Error(`there is no asset class ${id}`);
    return {
      assetClass,
      assets: assets.get(id) ?? [],
      records: records.get(id) ?? [],
      readings: readings.get(id) ?? [],
      fitted: fitted.get(id) ?? [],
      modes: modes.get(id) ?? [],
      renewalTask: tasks.get(id)?.[0] ?? null,
    };
  });
}

type OfClass<Row> = Row & { classId: string };

function byClass<Row>(rows: readonly OfClass<Row>[]): Map<string, Row[]> {
  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const group = groups.get(row.classId);
    if (group === undefined) groups.set(row.classId, [row]);
    else group.push(row);
  }
  return groups;
}

async function readClasses(db: Database, classIds: string[]): Promise<ClassRow[]> {
  const { rows } = await db.raw<{ rows: ClassRow[] }>(
    `select id, item_singular as "itemSingular", item_plural as "itemPlural", clock,
            statutory, endangers_people as "endangersPeople", hidden_failures as "hiddenFailures",
            planned_cost_minor as "plannedCostMinor", failure_cost_minor as "failureCostMinor",
            group_planned_cost_minor as "groupPlannedCostMinor",
            spares_lead_time_days as "sparesLeadTimeDays", required_availability as "requiredAvailability"
       from asset_classes where id = any(?)`,
    [classIds],
  );
  return rows;
}

async function readAssets(db: Database, classIds: string[]): Promise<OfClass<AssetRow>[]> {
  const { rows } = await db.raw<{ rows: OfClass<AssetRow>[] }>(
    `select a.class_id as "classId", a.id, a.tag, a.site_id as "siteId", s.name as "siteName", a.quantity, a.in_service_on as "inServiceOn",
            a.watched_from as "watchedFrom", a.watched_until as "watchedUntil", a.retired_on as "retiredOn",
            a.item_fitted_on as "itemFittedOn", a.duty_hours_per_day as "dutyHoursPerDay"
       from assets a join sites s on s.id = a.site_id where a.class_id = any(?) order by a.id`,
    [classIds],
  );
  return rows;
}

/** In order of entry within a day, so that the same records always give the same positions. */
async function readRecords(
  db: Database,
  classIds: string[],
  timeZone: string,
): Promise<OfClass<RecordRow>[]> {
  const timeOfDay = (column: string) =>
    `extract(epoch from (${column} at time zone :timeZone)::time)::float8 / 86400`;
  const { rows } = await db.raw<{ rows: OfClass<RecordRow>[] }>(
    `select * from (
       select class_id as "classId", asset_id as "assetId", failed_on as "day", ${timeOfDay('failed_at')} as "timeOfDay",
              'failure' as "source", effect = 'renewed' as "renewed", mode_id as "modeId",
              outside_cause as "outsideCause", item_fitted_on as "itemFittedOn", item_age as "itemAge",
              null::integer as "items", voided_at is not null as "voided", logged_at, id
         from failures where class_id = any(:classIds)
       union all
       select class_id, asset_id, done_on, ${timeOfDay('done_at')}, 'planned-work', renewed, null,
              null, item_fitted_on, null, items, voided_at is not null, logged_at, id
         from planned_work where class_id = any(:classIds)
     ) records
     order by "assetId", "day", logged_at, id`,
    { classIds, timeZone },
  );
  return rows;
}

async function readReadings(db: Database, classIds: string[]): Promise<OfClass<ReadingRow>[]> {
  const { rows } = await db.raw<{ rows: OfClass<ReadingRow>[] }>(
    `select a.class_id as "classId", r.asset_id as "assetId", r.read_on as "day", r.hours, r.meter_changed as "meterChanged"
       from meter_readings r join assets a on a.id = r.asset_id
      where a.class_id = any(?) and r.voided_at is null order by r.asset_id, r.read_on`,
    [classIds],
  );
  return rows;
}

async function readFitted(db: Database, classIds: string[]): Promise<OfClass<FittedRow>[]> {
  const { rows } = await db.raw<{ rows: OfClass<FittedRow>[] }>(
    `select a.class_id as "classId", f.asset_id as "assetId", f.fitted_on as "fittedOn", f.count
       from fitted_items f join assets a on a.id = f.asset_id
      where a.class_id = any(?) order by f.asset_id, f.fitted_on`,
    [classIds],
  );
  return rows;
}

async function readModes(db: Database, classIds: string[]): Promise<OfClass<{ id: string; name: string }>[]> {
  const { rows } = await db.raw<{ rows: OfClass<{ id: string; name: string }>[] }>(
    `select class_id as "classId", id, name from failure_modes where class_id = any(?) order by lower(name)`,
    [classIds],
  );
  return rows;
}

/**
 * One a class at most: where several are in force, the one that comes round most often is what ends lives. A trial on a
 * part of the class is not the class's schedule.
 */
async function readRenewalTasks(db: Database, classIds: string[], asOf: string): Promise<OfClass<TaskRow>[]> {
  const { rows } = await db.raw<{ rows: OfClass<TaskRow>[] }>(
    `select distinct on (class_id) class_id as "classId", name,
            interval_days as "intervalDays", interval_hours as "intervalHours"
       from maintenance_tasks t
      where class_id = any(:classIds) and kind in ('replace', 'restore')
        and starts_on <= :asOf and (ends_on is null or ends_on > :asOf)
        and not exists (select from maintenance_task_assets a where a.task_id = t.id)
      order by class_id, coalesce(interval_days, interval_hours / 24), id`,
    { classIds, asOf },
  );
  return rows;
}
