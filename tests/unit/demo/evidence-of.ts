import type { ClassSpec } from '../../../fixtures/demo/class-spec';
import type { DemoFailure, DemoPlannedWork, DemoRecords } from '../../../fixtures/demo/records';
import type { ClassEvidence } from '~/advice/class-evidence';
import type { ClassRecords, RecordRow } from '~/models/class-records.server';
import { dayNumber, dayOf } from '~/models/day-number';
import { layOutClass } from '~/models/lay-out-class';

/** The day the demo is filled in, for these tests; verdicts do not depend on it. */
const today = '2026-06-30';

const day = (offset: number) => dayOf(dayNumber(today) + offset);
const dayOrNull = (offset: number | null) => (offset === null ? null : day(offset));

/** The evidence of one demo class as of yesterday, laid out as the product lays it out from the database. */
export function evidenceOf(spec: ClassSpec, records: DemoRecords): ClassEvidence {
  return layOutClass(classRecordsOf(spec, records), { asOf: day(-1), serviceLevel: 0.95 });
}

function classRecordsOf(spec: ClassSpec, { assets, failures, plannedWork }: DemoRecords): ClassRecords {
  const own = assets.filter(({ className }) => className === spec.name);
  const ids = new Set(own.map(({ id }) => id));
  const isOwn = ({ assetId }: { assetId: string }) => ids.has(assetId);
  const task = spec.tasks.find(({ kind }) => kind === 'replace' || kind === 'restore');
  return {
    assetClass: {
      ...spec,
      id: spec.name,
      plannedCostMinor: spec.plannedCostMinor,
      failureCostMinor: spec.failureCostMinor,
      groupPlannedCostMinor: null,
      sparesLeadTimeDays: null,
      requiredAvailability: null,
    },
    assets: own.map((asset) => ({
      id: asset.id,
      tag: asset.tag,
      siteId: asset.site,
      siteName: asset.site,
      quantity: asset.quantity,
      inServiceOn: day(asset.inServiceDay),
      watchedFrom: day(asset.watchedFromDay),
      watchedUntil: null,
      retiredOn: dayOrNull(asset.retiredDay),
      itemFittedOn: dayOrNull(asset.itemFittedDay),
      dutyHoursPerDay: asset.dutyHoursPerDay,
    })),
    records: [...failures.filter(isOwn).map(failureRow), ...plannedWork.filter(isOwn).map(workRow)].sort(
      (a, b) => (a.day < b.day ? -1 : a.day > b.day ? 1 : 0),
    ),
    readings: [],
    fitted: [],
    modes: [...new Set(failures.filter(isOwn).map(({ mode }) => mode))].map((name) => ({ id: name, name })),
    renewalTask: task
      ? {
          name: task.name,
          intervalDays: task.intervalDays ?? null,
          intervalHours: task.intervalHours ?? null,
        }
      : null,
  };
}

type SharedColumns = Pick<
  RecordRow,
  'assetId' | 'day' | 'timeOfDay' | 'itemFittedOn' | 'itemAge' | 'items' | 'voided'
>;

function sharedColumns(record: DemoFailure | DemoPlannedWork): SharedColumns {
  return {
    assetId: record.assetId,
    day: day(record.day),
    timeOfDay: record.minute === null ? null : record.minute / 1440,
    itemFittedOn: dayOrNull(record.itemFittedDay),
    itemAge: null,
    items: null,
    voided: record.voided !== null,
  };
}

function failureRow(failure: DemoFailure): RecordRow {
  return {
    ...sharedColumns(failure),
    source: 'failure',
    renewed: failure.effect === 'renewed',
    modeId: failure.mode,
    outsideCause: failure.outsideCause,
  };
}

function workRow(work: DemoPlannedWork): RecordRow {
  return {
    ...sharedColumns(work),
    source: 'planned-work',
    renewed: work.renewed,
    modeId: null,
    outsideCause: null,
  };
}
