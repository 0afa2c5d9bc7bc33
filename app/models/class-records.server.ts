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

/**
 * Reads one class with all its records.
 *
 * @param timeZone of the organisation: decides where in its day a moment lies.
 * @param asOf the day whose maintenance tasks are in force.
 * @throws Error when there is no such class.
 */
export async function readClassRecords(
  db: Database,
  classId: string,
  { timeZone, asOf }: { timeZone: string; asOf: string },
): Promise<ClassRecords> {
  const assetClass = await readClass(db, classId);
  return {
    assetClass,
    assets: await readAssets(db, classId),
    records: await readRecords(db, classId, timeZone),
    readings: assetClass.clock === 'operating-hours' ? await readReadings(db, classId) : [],
    fitted: await readFitted(db, classId),
    modes: await readModes(db, classId),
    renewalTask: await readRenewalTask(db, classId, asOf),
  };
}

async function readClass(db: Database, classId: string): Promise<ClassRow> {
  const { rows } = await db.raw<{ rows: ClassRow[] }>(
    `select id, item_singular as "itemSingular", item_plural as "itemPlural", clock,
            statutory, endangers_people as "endangersPeople", hidden_failures as "hiddenFailures",
            planned_cost_minor as "plannedCostMinor", failure_cost_minor as "failureCostMinor",
            group_planned_cost_minor as "groupPlannedCostMinor",
            spares_lead_time_days as "sparesLeadTimeDays", required_availability as "requiredAvailability"
       from asset_classes where id = ?`,
    [classId],
  );
  if (rows[0] === undefined) throw new Error(`there is no asset class ${classId}`);
  return rows[0];
}

async function readAssets(db: Database, classId: string): Promise<AssetRow[]> {
  const { rows } = await db.raw<{ rows: AssetRow[] }>(
    `select a.id, a.tag, a.site_id as "siteId", s.name as "siteName", a.quantity, a.in_service_on as "inServiceOn",
            a.watched_from as "watchedFrom", a.watched_until as "watchedUntil", a.retired_on as "retiredOn",
            a.item_fitted_on as "itemFittedOn", a.duty_hours_per_day as "dutyHoursPerDay"
       from assets a join sites s on s.id = a.site_id where a.class_id = ? order by a.id`,
    [classId],
  );
  return rows;
}

/** In order of entry within a day, so that the same records always give the same positions. */
async function readRecords(db: Database, classId: string, timeZone: string): Promise<RecordRow[]> {
  const timeOfDay = (column: string) =>
    `extract(epoch from (${column} at time zone :timeZone)::time)::float8 / 86400`;
  const { rows } = await db.raw<{ rows: RecordRow[] }>(
    `select * from (
       select asset_id as "assetId", failed_on as "day", ${timeOfDay('failed_at')} as "timeOfDay",
              'failure' as "source", effect = 'renewed' as "renewed", mode_id as "modeId",
              outside_cause as "outsideCause", item_fitted_on as "itemFittedOn", item_age as "itemAge",
              null::integer as "items", voided_at is not null as "voided", logged_at, id
         from failures where class_id = :classId
       union all
       select asset_id, done_on, ${timeOfDay('done_at')}, 'planned-work', renewed, null,
              null, item_fitted_on, null, items, voided_at is not null, logged_at, id
         from planned_work where class_id = :classId
     ) records
     order by "assetId", "day", logged_at, id`,
    { classId, timeZone },
  );
  return rows;
}

async function readReadings(db: Database, classId: string): Promise<ReadingRow[]> {
  const { rows } = await db.raw<{ rows: ReadingRow[] }>(
    `select r.asset_id as "assetId", r.read_on as "day", r.hours, r.meter_changed as "meterChanged"
       from meter_readings r join assets a on a.id = r.asset_id
      where a.class_id = ? and r.voided_at is null order by r.asset_id, r.read_on`,
    [classId],
  );
  return rows;
}

async function readFitted(db: Database, classId: string): Promise<FittedRow[]> {
  const { rows } = await db.raw<{ rows: FittedRow[] }>(
    `select f.asset_id as "assetId", f.fitted_on as "fittedOn", f.count
       from fitted_items f join assets a on a.id = f.asset_id
      where a.class_id = ? order by f.asset_id, f.fitted_on`,
    [classId],
  );
  return rows;
}

async function readModes(db: Database, classId: string): Promise<{ id: string; name: string }[]> {
  const { rows } = await db.raw<{ rows: { id: string; name: string }[] }>(
    `select id, name from failure_modes where class_id = ? order by lower(name)`,
    [classId],
  );
  return rows;
}

/** Where several are in force, the one that comes round most often is what ends lives. */
async function readRenewalTask(db: Database, classId: string, asOf: string): Promise<TaskRow | null> {
  const { rows } = await db.raw<{ rows: TaskRow[] }>(
    `select name, interval_days as "intervalDays", interval_hours as "intervalHours"
       from maintenance_tasks
      where class_id = :classId and kind in ('replace', 'restore')
        and starts_on <= :asOf and (ends_on is null or ends_on > :asOf)
      order by coalesce(interval_days, interval_hours / 24), id limit 1`,
    { classId, asOf },
  );
  return rows[0] ?? null;
}
