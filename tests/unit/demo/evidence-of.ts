import type { ClassSpec } from '../../../fixtures/demo/class-spec';
import type { DemoAsset, DemoFailure, DemoPlannedWork, DemoRecords } from '../../../fixtures/demo/records';
import type { ClassEvidence } from '~/advice/class-evidence';
import type { Position, PositionEvent } from '~/reliability/position';
import { calendarUsage, dutyUsage } from '~/reliability/usage';

/** The evidence of one demo class as of yesterday, on day offsets, laid out as the records tell it. */
export function evidenceOf(spec: ClassSpec, records: DemoRecords): ClassEvidence {
  const assets = records.assets.filter(
    ({ className, quantity }) => className === spec.name && quantity === 1,
  );
  const failuresOf = groupByAsset(records.failures);
  const workOf = groupByAsset(records.plannedWork);
  const positions = assets.map((asset) =>
    positionOf(spec, asset, failuresOf.get(asset.id) ?? [], workOf.get(asset.id) ?? []),
  );
  return {
    itemSingular: spec.itemSingular,
    itemPlural: spec.itemPlural,
    clock: spec.clock,
    statutory: spec.statutory,
    endangersPeople: spec.endangersPeople,
    now: 0,
    positions,
    positionsWithAssumedClock: spec.clock === 'operating-hours' ? positions.length : 0,
    modes: [],
    leftOut: [],
  };
}

function groupByAsset<T extends { assetId: string }>(records: readonly T[]): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const record of records) groups.set(record.assetId, [...(groups.get(record.assetId) ?? []), record]);
  return groups;
}

function positionOf(
  spec: ClassSpec,
  asset: DemoAsset,
  failures: readonly DemoFailure[],
  work: readonly DemoPlannedWork[],
): Position {
  const events = [
    ...failures.filter(({ voided }) => voided === null).flatMap(failureEvent),
    ...work.filter(({ renewed, voided }) => renewed && voided === null).map((record) => renewalEvent(record)),
  ];
  return {
    id: asset.id,
    inServiceAt: asset.inServiceDay,
    watchFrom: asset.watchedFromDay,
    watchTo: asset.retiredDay ?? 0,
    fittedAt: asset.itemFittedDay,
    usage: spec.clock === 'operating-hours' ? dutyUsage(asset.dutyHoursPerDay ?? NaN) : calendarUsage,
    halfResolutionDays: 0.5,
    events: events.sort((a, b) => a.at - b.at),
  };
}

function failureEvent(failure: DemoFailure): PositionEvent[] {
  const { outsideCause, effect, mode, itemFittedDay } = failure;
  const base = { at: momentOf(failure), itemFittedAt: itemFittedDay };
  if (outsideCause === null) {
    return [{ ...base, kind: effect === 'renewed' ? 'failure-renewed' : 'failure-patched', mode }];
  }
  return effect === 'renewed' ? [{ ...base, kind: 'other-renewal', mode: null }] : [];
}

function renewalEvent(work: DemoPlannedWork): PositionEvent {
  return { at: momentOf(work), kind: 'planned-renewal', mode: null, itemFittedAt: work.itemFittedDay };
}

function momentOf({ day, minute }: { day: number; minute: number | null }): number {
  return day + (minute ?? 0) / 1440;
}
