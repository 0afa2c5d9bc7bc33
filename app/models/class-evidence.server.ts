import type { ClassEvidence, ClockKind, LeftOutReason } from '~/advice/class-evidence';
import type { Position, PositionEvent } from '~/reliability/position';
import { calendarUsage, dutyUsage, type Usage } from '~/reliability/usage';
import type { Database } from '../../db/connection';
import { dayNumber } from './day-number';

interface ClassRow {
  id: string;
  itemSingular: string;
  itemPlural: string;
  clock: ClockKind;
  statutory: boolean;
  endangersPeople: boolean;
}

interface AssetRow {
  id: string;
  quantity: number;
  inServiceOn: string;
  watchedFrom: string;
  watchedUntil: string | null;
  retiredOn: string | null;
  itemFittedOn: string | null;
  dutyHoursPerDay: number | null;
}

interface RecordRow {
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
  voided: boolean;
}

const halfADay = 0.5;

/** Every class, in a fixed order. */
export async function listClassIds(db: Database): Promise<string[]> {
  const { rows } = await db.raw<{ rows: { id: string }[] }>(`select id from asset_classes order by id`);
  return rows.map(({ id }) => id);
}

/** One class with all its records, as the database has them. */
export interface ClassRecords {
  assetClass: ClassRow;
  assets: AssetRow[];
  recordsByAsset: Map<string, RecordRow[]>;
  modes: { id: string; name: string }[];
}

/**
 * Reads one class with all its records.
 *
 * @param timeZone of the organisation: decides where in its day a moment lies.
 * @throws Error when there is no such class.
 */
export async function readClassRecords(
  db: Database,
  classId: string,
  timeZone: string,
): Promise<ClassRecords> {
  return {
    assetClass: await readClass(db, classId),
    assets: await readAssets(db, classId),
    recordsByAsset: groupByAsset(await readRecords(db, classId, timeZone)),
    modes: await readModes(db, classId),
  };
}

/**
 * Lays a class's records out as positions on day numbers.
 *
 * @param asOf last complete day whose records count.
 * @throws RangeError for a number that no check of the database lets in.
 */
export function layOutClass(records: ClassRecords, asOf: string): ClassEvidence {
  const { assetClass, assets, recordsByAsset, modes } = records;
  const now = dayNumber(asOf) + 1;
  const leftOut = new Map<LeftOutReason, number>();
  const leaveOut = (reason: LeftOutReason, count = 1) => {
    if (count > 0) leftOut.set(reason, (leftOut.get(reason) ?? 0) + count);
  };

  const positions: Position[] = [];
  for (const asset of assets) {
    const records = recordsByAsset.get(asset.id) ?? [];
    const usage = usageOf(asset, assetClass.clock);
    if (usage === null) leaveOut('no-duty', records.length);
    else if (asset.quantity > 1) leaveOut('group-asset', records.length);
    else {
      const position = layOut(asset, records, usage, now, leaveOut);
      if (position !== null) positions.push(position);
    }
  }

  return {
    itemSingular: assetClass.itemSingular,
    itemPlural: assetClass.itemPlural,
    clock: assetClass.clock,
    statutory: assetClass.statutory,
    endangersPeople: assetClass.endangersPeople,
    now,
    positions,
    positionsWithAssumedClock: assetClass.clock === 'operating-hours' ? positions.length : 0,
    modes,
    leftOut: [...leftOut].map(([reason, count]) => ({ reason, count })),
  };
}

function groupByAsset(records: readonly RecordRow[]): Map<string, RecordRow[]> {
  const groups = new Map<string, RecordRow[]>();
  for (const record of records) {
    const group = groups.get(record.assetId);
    if (group === undefined) groups.set(record.assetId, [record]);
    else group.push(record);
  }
  return groups;
}

/** Null when the class runs on operating hours and nobody has said how many the asset runs. */
function usageOf(asset: AssetRow, clock: ClockKind): Usage | null {
  if (clock === 'calendar-days') return calendarUsage;
  return asset.dutyHoursPerDay === null ? null : dutyUsage(asset.dutyHoursPerDay);
}

function layOut(
  asset: AssetRow,
  records: readonly RecordRow[],
  usage: Usage,
  now: number,
  leaveOut: (reason: LeftOutReason) => void,
): Position | null {
  const inServiceAt = dayNumber(asset.inServiceOn);
  const watchFrom = dayNumber(asset.watchedFrom);
  const ends = [asset.watchedUntil, asset.retiredOn].filter((day) => day !== null).map(dayNumber);
  const watchTo = Math.min(now, ...ends);
  if (watchTo <= watchFrom) return null;

  const events: PositionEvent[] = [];
  for (const record of records) {
    const day = dayNumber(record.day);
    if (record.voided) {
      leaveOut('voided');
    } else if (day < watchFrom && !record.renewed) {
      leaveOut('before-watch');
    } else if (day > watchTo || day >= now) {
      leaveOut('after-watch');
    } else {
      if (day < watchFrom) leaveOut('before-watch');
      const event = toEvent(
        record,
        momentOf(record, day, { inServiceAt, watchFrom, watchTo }),
        usage,
        leaveOut,
      );
      if (event !== null) events.push(event);
    }
  }

  return {
    id: asset.id,
    inServiceAt,
    watchFrom,
    watchTo,
    fittedAt: asset.itemFittedOn === null ? null : dayNumber(asset.itemFittedOn),
    usage,
    halfResolutionDays: halfADay,
    events: events.sort((a, b) => a.at - b.at),
  };
}

/**
 * Where on the day count a record stands. A day without a time is its start, as dates of service and of
 * watching are. On the first day of a watch that opened later than the service, that would be just before
 * the watch, so there it is noon.
 */
function momentOf(
  record: RecordRow,
  day: number,
  { inServiceAt, watchFrom, watchTo }: { inServiceAt: number; watchFrom: number; watchTo: number },
): number {
  const opensLater = day === watchFrom && watchFrom > inServiceAt;
  const moment = day + (record.timeOfDay ?? (opensLater ? halfADay : 0));
  return day > watchTo ? moment : Math.min(moment, watchTo);
}

function toEvent(
  record: RecordRow,
  at: number,
  usage: Usage,
  leaveOut: (reason: LeftOutReason) => void,
): PositionEvent | null {
  const itemFittedAt = fittedAtOf(record, at, usage);
  if (record.source === 'planned-work') {
    if (!record.renewed) {
      leaveOut('inspection');
      return null;
    }
    return { at, kind: 'planned-renewal', mode: null, itemFittedAt };
  }
  if (record.outsideCause !== null) {
    leaveOut('outside-cause');
    return record.renewed ? { at, kind: 'other-renewal', mode: null, itemFittedAt } : null;
  }
  return {
    at,
    kind: record.renewed ? 'failure-renewed' : 'failure-patched',
    mode: record.modeId,
    itemFittedAt,
  };
}

/** An age on the record is turned back into the day the item was fitted, at the asset's own pace. */
function fittedAtOf(record: RecordRow, at: number, usage: Usage): number | null {
  if (record.itemFittedOn !== null) return dayNumber(record.itemFittedOn);
  if (record.itemAge === null) return null;
  const pacePerDay = usage.at(at + 1) - usage.at(at);
  return at - record.itemAge / pacePerDay;
}

async function readClass(db: Database, classId: string): Promise<ClassRow> {
  const { rows } = await db.raw<{ rows: ClassRow[] }>(
    `select id, item_singular as "itemSingular", item_plural as "itemPlural", clock,
            statutory, endangers_people as "endangersPeople"
       from asset_classes where id = ?`,
    [classId],
  );
  if (rows[0] === undefined) throw new Error(`there is no asset class ${classId}`);
  return rows[0];
}

async function readAssets(db: Database, classId: string): Promise<AssetRow[]> {
  const { rows } = await db.raw<{ rows: AssetRow[] }>(
    `select id, quantity, in_service_on as "inServiceOn", watched_from as "watchedFrom",
            watched_until as "watchedUntil", retired_on as "retiredOn",
            item_fitted_on as "itemFittedOn", duty_hours_per_day as "dutyHoursPerDay"
       from assets where class_id = ? order by id`,
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
              voided_at is not null as "voided", logged_at, id
         from failures where class_id = :classId
       union all
       select asset_id, done_on, ${timeOfDay('done_at')}, 'planned-work', renewed, null,
              null, item_fitted_on, null, voided_at is not null, logged_at, id
         from planned_work where class_id = :classId
     ) records
     order by "assetId", "day", logged_at, id`,
    { classId, timeZone },
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
