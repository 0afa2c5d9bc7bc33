import { randomUUID } from 'node:crypto';
import { dayNumber, dayOf } from '~/models/day-number';
import type { Database } from '../../db/connection';
import { addAsset, addClass } from './records';
import { seededRandom, weibullLife } from './seeded-random';

/** A class of Weibull items on record, each failed item replaced at once. */
export interface SimulatedRecords {
  readonly name: string;
  readonly siteId: string;
  readonly assets: number;
  readonly shape: number;
  /** Days. */
  readonly scale: number;
  /** Opening of the watch, 'YYYY-MM-DD'; items were fitted evenly over the two years before. */
  readonly watchedFrom: string;
  /** Age in days of planned renewal; none unless given. */
  readonly renewalAge?: number;
  /** Another age from a day on; null to stop. */
  readonly changed?: { readonly on: string; readonly renewalAge: number | null };
  readonly seed: number;
  /** Columns of the class that differ. */
  readonly columns?: Record<string, unknown>;
}

const daysBefore = 730;

interface SimulatedEvent {
  asset: number;
  day: number;
  kind: 'failure' | 'renewal';
}

/** When an item fitted on a day is due by plan; infinite where it is not. */
function dueDay(fitted: number, { renewalAge, changed }: SimulatedRecords): number {
  const first = fitted + (renewalAge ?? Infinity);
  if (changed === undefined || first < dayNumber(changed.on)) return first;
  return Math.max(dayNumber(changed.on), fitted + (changed.renewalAge ?? Infinity));
}

/** All that happens to one asset up to a day; a change of schedule alters nothing before it. */
function eventsOf(records: SimulatedRecords, asset: number, until: number): SimulatedEvent[] {
  const random = seededRandom(records.seed * 1000 + asset);
  const events: SimulatedEvent[] = [];
  let fitted = dayNumber(records.watchedFrom) - Math.floor(((asset + 0.5) / records.assets) * daysBefore);
  for (;;) {
    const life = Math.max(1, Math.round(weibullLife(random, records.shape, records.scale)));
    const due = Math.max(fitted + 1, Math.ceil(dueDay(fitted, records)));
    const day = Math.min(fitted + life, due);
    if (day > until) return events;
    events.push({ asset, day, kind: fitted + life <= due ? 'failure' : 'renewal' });
    fitted = day;
  }
}

/** Adds the class with its assets and no records yet. */
export async function addSimulatedClass(
  db: Database,
  records: SimulatedRecords,
): Promise<{ classId: string; assetIds: string[] }> {
  const classId = await addClass(db, records.name, records.columns);
  const start = dayNumber(records.watchedFrom);
  const assetIds: string[] = [];
  for (let asset = 0; asset < records.assets; asset += 1) {
    const inService = dayOf(start - Math.floor(((asset + 0.5) / records.assets) * daysBefore));
    const fitted = eventsOf(records, asset, start).at(-1)?.day;
    assetIds.push(
      await addAsset(db, { classId, siteId: records.siteId }, `${records.name}-${asset + 1}`, {
        in_service_on: inService,
        watched_from: records.watchedFrom,
        item_fitted_on: fitted === undefined ? inService : dayOf(fitted),
      }),
    );
  }
  return { classId, assetIds };
}

/** Adds what happened from one day to another, `after` left out and `until` taken in. */
export async function addSimulatedRecords(
  db: Database,
  records: SimulatedRecords,
  { classId, assetIds }: { classId: string; assetIds: readonly string[] },
  period: { after: string; until: string },
): Promise<void> {
  const [after, until] = [dayNumber(period.after), dayNumber(period.until)];
  const events = assetIds
    .flatMap((_, asset) => eventsOf(records, asset, until))
    .filter(({ day }) => day > after);
  const common = (event: SimulatedEvent) => ({
    id: randomUUID(),
    asset_id: assetIds[event.asset],
    class_id: classId,
    logged_at: new Date(`${dayOf(event.day)}T12:00:00Z`),
  });
  const failures = events
    .filter(({ kind }) => kind === 'failure')
    .map((event) => ({ ...common(event), failed_on: dayOf(event.day), effect: 'renewed' }));
  const renewals = events
    .filter(({ kind }) => kind === 'renewal')
    .map((event) => ({ ...common(event), done_on: dayOf(event.day), kind: 'replace', renewed: true }));
  if (failures.length > 0) await db.batchInsert('failures', failures, 500);
  if (renewals.length > 0) await db.batchInsert('planned_work', renewals, 500);
}
