import type { ClassEvidence, LeftOutReason, Place } from '~/advice/class-evidence';
import type { Position, PositionEvent } from '~/reliability/position';
import type { Usage } from '~/reliability/usage';
import { assetUsage } from './asset-usage';
import type { AssetRow, ClassRecords, RecordRow } from './class-records.server';
import { dayNumber } from './day-number';
import { layOutGroup, type GroupEvent } from './lay-out-group';

const halfADay = 0.5;
const daysAYear = 365.25;

type LeaveOut = (reason: LeftOutReason, count?: number) => void;

/**
 * Lays a class's records out as positions on day numbers: one for an asset of quantity 1, as many as there
 * are items for a quantity asset.
 *
 * @param night.asOf last complete day whose records count.
 * @param night.serviceLevel of the organisation, for the spares to hold.
 * @throws RangeError for a number that no check of the database lets in.
 */
export function layOutClass(
  records: ClassRecords,
  { asOf, serviceLevel }: { asOf: string; serviceLevel: number },
): ClassEvidence {
  const { assetClass, modes, renewalTask } = records;
  const now = dayNumber(asOf) + 1;
  const leftOut = new Map<LeftOutReason, number>();
  const leaveOut: LeaveOut = (reason, count = 1) => {
    if (count > 0) leftOut.set(reason, (leftOut.get(reason) ?? 0) + count);
  };
  const recordsOf = groupByAsset(records.records);
  const readingsOf = groupByAsset(records.readings);
  const fittedOf = groupByAsset(records.fitted);

  const positions: Position[] = [];
  const rateOnlyPositions: Position[] = [];
  const places = new Map<string, Place>();
  const visits = new Map<string, number[]>();
  const groups = { assets: 0, items: 0, itemsOfUnknownAge: 0, failures: 0, undatedFailures: 0 };
  let assumed = 0;

  for (const asset of records.assets) {
    const own = recordsOf.get(asset.id) ?? [];
    const clock = assetUsage(asset, assetClass.clock, readingsOf.get(asset.id) ?? []);
    if (clock === null) {
      leaveOut('no-duty', own.length);
      continue;
    }
    const frame = frameOf(asset, clock.usage, now);
    if (frame === null) continue;
    const events = eventsOf(own, frame, now, leaveOut);
    const laidOut: Position[] = [];
    if (asset.quantity === 1) {
      const position = {
        ...frame,
        id: asset.id,
        fittedAt: dayOrNull(asset.itemFittedOn),
        events: events.map(single),
      };
      positions.push(position);
      laidOut.push(position);
    } else {
      const fitted = (fittedOf.get(asset.id) ?? []).map(({ fittedOn, count }) => ({
        at: dayNumber(fittedOn),
        count,
      }));
      const group = layOutGroup({ id: asset.id, quantity: asset.quantity, fitted, frame, events });
      (group.agesKnown ? positions : rateOnlyPositions).push(...group.positions);
      laidOut.push(...group.positions);
      groups.assets += 1;
      groups.items += asset.quantity;
      groups.itemsOfUnknownAge += group.itemsOfUnknownAge;
      groups.failures += group.failures;
      groups.undatedFailures += group.undatedFailures;
    }
    for (const { id } of laidOut)
      places.set(id, { tag: asset.tag, siteId: asset.siteId, siteName: asset.siteName });
    if (asset.quantity === 1) visits.set(asset.id, visitsOf(own, frame));
    if (clock.isAssumed && assetClass.clock === 'operating-hours') assumed += laidOut.length;
  }

  const everyPosition = [...positions, ...rateOnlyPositions];
  const unitsAYear = clockUnitsAYear(everyPosition);
  return {
    itemSingular: assetClass.itemSingular,
    itemPlural: assetClass.itemPlural,
    clock: assetClass.clock,
    statutory: assetClass.statutory,
    endangersPeople: assetClass.endangersPeople,
    hiddenFailures: assetClass.hiddenFailures,
    costs: {
      plannedMinor: assetClass.plannedCostMinor,
      failureMinor: assetClass.failureCostMinor,
      groupPlannedMinor: assetClass.groupPlannedCostMinor,
    },
    sparesLeadTimeDays: assetClass.sparesLeadTimeDays,
    serviceLevel,
    requiredAvailability: assetClass.requiredAvailability,
    currentTask: renewalTask && {
      name: renewalTask.name,
      interval:
        assetClass.clock === 'calendar-days'
          ? (renewalTask.intervalDays ?? renewalTask.intervalHours! / 24)
          : (renewalTask.intervalHours ?? (renewalTask.intervalDays! * unitsAYear) / daysAYear),
    },
    clockUnitsAYear: unitsAYear,
    now,
    positions,
    rateOnlyPositions,
    positionsWithAssumedClock: assumed,
    places,
    visits,
    groups,
    modes,
    leftOut: [...leftOut].map(([reason, count]) => ({ reason, count })),
  };
}

function groupByAsset<Row extends { assetId: string }>(rows: readonly Row[]): Map<string, Row[]> {
  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const group = groups.get(row.assetId);
    if (group === undefined) groups.set(row.assetId, [row]);
    else group.push(row);
  }
  return groups;
}

type Frame = Omit<Position, 'id' | 'fittedAt' | 'events'>;

/** The asset's watch; null while it has no length. */
function frameOf(asset: AssetRow, usage: Usage, now: number): Frame | null {
  const watchFrom = dayNumber(asset.watchedFrom);
  const ends = [asset.watchedUntil, asset.retiredOn].filter((day) => day !== null).map(dayNumber);
  const watchTo = Math.min(now, ...ends);
  if (watchTo <= watchFrom) return null;
  return {
    inServiceAt: dayNumber(asset.inServiceOn),
    watchFrom,
    watchTo,
    usage,
    halfResolutionDays: halfADay,
  };
}

function eventsOf(
  records: readonly RecordRow[],
  frame: Frame,
  now: number,
  leaveOut: LeaveOut,
): GroupEvent[] {
  const { watchFrom, watchTo, usage } = frame;
  const events: GroupEvent[] = [];
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
      const event = toEvent(record, momentOf(record, day, frame), usage, leaveOut);
      if (event !== null)
        events.push({ ...event, items: record.source === 'planned-work' ? record.items : 1 });
    }
  }
  return events.sort((a, b) => a.at - b.at);
}

function single({ at, kind, mode, itemFittedAt }: GroupEvent): PositionEvent {
  return { at, kind, mode, itemFittedAt };
}

/**
 * Where on the day count a record stands. A day without a time is its start, as dates of service and of
 * watching are. On the first day of a watch that opened later than the service, that would be just before
 * the watch, so there it is noon.
 */
function momentOf(record: RecordRow, day: number, { inServiceAt, watchFrom, watchTo }: Frame): number {
  const opensLater = day === watchFrom && watchFrom > inServiceAt;
  const moment = day + (record.timeOfDay ?? (opensLater ? halfADay : 0));
  return day > watchTo ? moment : Math.min(moment, watchTo);
}

function toEvent(record: RecordRow, at: number, usage: Usage, leaveOut: LeaveOut): PositionEvent | null {
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
  return pacePerDay > 0 ? at - record.itemAge / pacePerDay : null;
}

/** When somebody came by plan and renewed nothing; voided visits did not happen. */
function visitsOf(records: readonly RecordRow[], frame: Frame): number[] {
  return records
    .filter(({ source, renewed, voided }) => source === 'planned-work' && !renewed && !voided)
    .map((record) => momentOf(record, dayNumber(record.day), frame))
    .filter((at) => at >= frame.watchFrom && at < frame.watchTo);
}

/** Clock units one position runs in a year, averaged over the exposure; a year of days without any. */
function clockUnitsAYear(positions: readonly Position[]): number {
  let units = 0;
  let days = 0;
  for (const { usage, watchFrom, watchTo } of positions) {
    units += usage.at(watchTo) - usage.at(watchFrom);
    days += watchTo - watchFrom;
  }
  return days === 0 ? daysAYear : (units / days) * daysAYear;
}

function dayOrNull(day: string | null): number | null {
  return day === null ? null : dayNumber(day);
}
