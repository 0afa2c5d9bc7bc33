import type { DemoAsset, DemoFailure, DemoPlannedWork } from '../../fixtures/demo/records';
import type { DemoCalendar } from './demo-calendar';

/** Ids by name; areas, modes and tasks by `owner/name`, people by e-mail address. */
export interface DemoIds {
  readonly sites: ReadonlyMap<string, string>;
  readonly areas: ReadonlyMap<string, string>;
  readonly people: ReadonlyMap<string, string>;
  readonly classes: ReadonlyMap<string, string>;
  readonly modes: ReadonlyMap<string, string>;
  readonly tasks: ReadonlyMap<string, string>;
}

type Row = Record<string, unknown>;

export function assetRow(asset: DemoAsset, ids: DemoIds, { dayOf }: DemoCalendar): Row {
  return {
    id: asset.id,
    class_id: idOf(ids.classes, asset.className),
    site_id: idOf(ids.sites, asset.site),
    area_id: idOf(ids.areas, `${asset.site}/${asset.area}`),
    tag: asset.tag,
    quantity: asset.quantity,
    in_service_on: dayOf(asset.inServiceDay),
    watched_from: dayOf(asset.watchedFromDay),
    retired_on: asset.retiredDay === null ? null : dayOf(asset.retiredDay),
    item_fitted_on: asset.itemFittedDay === null ? null : dayOf(asset.itemFittedDay),
    duty_hours_per_day: asset.dutyHoursPerDay,
  };
}

export function failureRow(
  failure: DemoFailure,
  className: string,
  ids: DemoIds,
  calendar: DemoCalendar,
): Row {
  return {
    ...recordRow(failure, className, ids, calendar),
    mode_id: idOf(ids.modes, `${className}/${failure.mode}`),
    failed_on: calendar.dayOf(failure.day),
    failed_at: momentOrNull(failure, calendar),
    effect: failure.effect,
    outside_cause: failure.outsideCause,
  };
}

export function plannedWorkRow(
  work: DemoPlannedWork,
  className: string,
  ids: DemoIds,
  calendar: DemoCalendar,
): Row {
  return {
    ...recordRow(work, className, ids, calendar),
    task_id: idOf(ids.tasks, `${className}/${work.task}`),
    kind: work.kind,
    renewed: work.renewed,
    done_on: calendar.dayOf(work.day),
    done_at: momentOrNull(work, calendar),
  };
}

/** The entry that voiding a failure leaves in the audit trail; none for a failure that stands. */
export function voidAuditRow({ id, voided }: DemoFailure, ids: DemoIds, { momentOf }: DemoCalendar): Row[] {
  if (voided === null) return [];
  return [
    {
      at: momentOf(voided.day, voided.minute),
      person_id: idOf(ids.people, voided.by),
      action: 'void',
      subject: 'failure',
      subject_id: id,
      before: { voided: false },
      after: { voided: true, reason: voided.reason },
    },
  ];
}

function recordRow(
  record: DemoFailure | DemoPlannedWork,
  className: string,
  ids: DemoIds,
  calendar: DemoCalendar,
): Row {
  const { voided } = record;
  const loggedAt = calendar.momentOf(record.loggedDay, record.loggedMinute);
  const voidedAt = voided === null ? null : calendar.momentOf(voided.day, voided.minute);
  return {
    id: record.id,
    asset_id: record.assetId,
    class_id: idOf(ids.classes, className),
    item_fitted_on: record.itemFittedDay === null ? null : calendar.dayOf(record.itemFittedDay),
    note: record.note,
    logged_at: loggedAt,
    logged_by: idOf(ids.people, record.loggedBy),
    voided_at: voidedAt,
    voided_by: voided === null ? null : idOf(ids.people, voided.by),
    void_reason: voided?.reason ?? null,
    version: voided === null ? 1 : 2,
    updated_at: voidedAt ?? loggedAt,
  };
}

function momentOrNull(
  { day, minute }: { day: number; minute: number | null },
  calendar: DemoCalendar,
): Date | null {
  return minute === null ? null : calendar.momentOf(day, minute);
}

function idOf(ids: ReadonlyMap<string, string>, key: string): string {
  const id = ids.get(key);
  if (id === undefined) throw new Error(`the demo has nothing called ${key}`);
  return id;
}
