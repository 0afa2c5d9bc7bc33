import type { Database } from '../../db/connection';
import {
  importClocks,
  refuseAssetDates,
  type AssetDates,
  type ReadRegisterRow,
  type RegisterRow,
} from './import-register-row';
import { changesOf, sameName, type JudgedRow, type ReadRow } from './import-row';
import type { CellRemark } from './import-types';

type Clock = (typeof importClocks)[keyof typeof importClocks];

/** An asset as a register row would have it. */
export interface RegisterTarget extends AssetDates {
  readonly line: number;
  /** Null for an asset that is not held yet. */
  readonly id: string | null;
  readonly tag: string;
  readonly site: string;
  readonly area: string | null;
  readonly className: string;
  /** What a class that is not held yet is made with. */
  readonly newClass: { readonly clock: Clock; readonly item: string; readonly items: string } | null;
  readonly quantity: number;
  readonly hoursADay: number | null;
}

interface HeldAsset extends AssetDates {
  readonly line: number;
  readonly id: string;
  readonly className: string;
  readonly site: string;
  readonly area: string | null;
  readonly quantity: number;
  readonly hoursADay: number | null;
  /** First and last day of its records that count; null when it has none. */
  readonly firstRecord: string | null;
  readonly lastRecord: string | null;
}

/** Classes a file brings with it, by name in small letters: the first row that gives a clock settles it. */
export type NewClasses = Map<string, { clock: 'days' | 'hours'; item: string | null; items: string | null }>;

/**
 * Holds register rows against the assets and classes there are.
 *
 * @param newClasses what earlier rows of the file said of classes not held yet; this batch adds to it.
 * @param lock whether the assets found are kept from changing until the transaction ends.
 */
export async function judgeRegister(
  trx: Database,
  rows: readonly ReadRow<ReadRegisterRow>[],
  { newClasses, lock }: { newClasses: NewClasses; lock: boolean },
): Promise<JudgedRow<RegisterRow, RegisterTarget>[]> {
  const assets = await findAssets(trx, rows, lock);
  const clocks = await findClocks(trx, rows);
  return rows.map(({ line, row, remarks }) => {
    const settled = settleClass(row, clocks, newClasses);
    const asset = assets.get(line);
    const target = targetOf(line, row, settled.row, asset);
    const problems = [
      ...remarks,
      ...settled.remarks,
      ...(target ? refuseAssetDates(target) : []),
      ...(target && asset ? refuseForRecords(target, asset) : []),
    ];
    if (target === null || settled.row === null || problems.length > 0) {
      return { line, status: 'rejected', remarks: problems, row: null, target: null };
    }
    const judged = { line, row: settled.row };
    if (!asset) return { ...judged, status: 'new', remarks: [], target };
    const changes = changesFor(target, asset);
    if (changes.length === 0) return { ...judged, status: 'unchanged', remarks: [], target: null };
    return { ...judged, status: 'changed', remarks: changes, target };
  });
}

function settleClass(
  read: ReadRegisterRow,
  clocks: ReadonlyMap<string, Clock>,
  newClasses: NewClasses,
): { row: RegisterRow | null; remarks: CellRemark[] } {
  const { className, site, tag, inServiceOn } = read;
  if (className === null) return { row: null, remarks: [] };
  const held = clocks.get(className);
  const brought = newClasses.get(className.toLowerCase());
  const clock = read.clock ?? (held ? null : (brought?.clock ?? null));
  const remarks: CellRemark[] = [];
  const refuse = (reason: string) => remarks.push({ column: 'clock', value: read.clock ?? '', reason });
  if (held && clock && importClocks[clock] !== held) {
    refuse(`The class “${className}” is kept in ${held === 'calendar-days' ? 'days' : 'hours'}.`);
  }
  if (!held && clock === null)
    refuse(`The class “${className}” is new: say whether its clock is days or hours.`);
  if (!held && brought && clock && clock !== brought.clock) {
    refuse(`An earlier row makes the class “${className}” with the clock ${brought.clock}.`);
  }
  if (!held && clock && !brought) {
    newClasses.set(className.toLowerCase(), { clock, item: read.item, items: read.items });
  }
  if (site === null || tag === null || inServiceOn === null) return { row: null, remarks };
  const names = held ? read : (newClasses.get(className.toLowerCase()) ?? read);
  return {
    row: { ...read, className, site, tag, inServiceOn, clock, item: names.item, items: names.items },
    remarks,
  };
}

function targetOf(
  line: number,
  read: ReadRegisterRow,
  row: RegisterRow | null,
  asset: HeldAsset | undefined,
): RegisterTarget | null {
  if (row === null) return null;
  const sameSite = asset !== undefined && sameName(asset.site, row.site);
  const kept = <Value>(given: Value | undefined, held: Value | undefined, otherwise: Value): Value =>
    given === undefined ? (held ?? otherwise) : given;
  // A wrong date is reported by itself: holding the others against it would only add noise.
  const watchedFrom = kept(row.watchedFrom, asset?.watchedFrom, null) ?? row.inServiceOn;
  return {
    line,
    id: asset?.id ?? null,
    tag: row.tag,
    site: row.site,
    area: kept(row.area, sameSite ? asset.area : null, null),
    className: row.className,
    newClass: row.clock
      ? {
          clock: importClocks[row.clock],
          item: row.item ?? singularOf(row.className),
          items: row.items ?? pluralOf(row.item ?? singularOf(row.className)),
        }
      : null,
    quantity: kept(read.quantity, asset?.quantity, null) ?? 1,
    inServiceOn: row.inServiceOn,
    watchedFrom,
    watchedUntil: kept(row.watchedUntil, asset?.watchedUntil, null),
    retiredOn: kept(row.retiredOn, asset?.retiredOn, null),
    hoursADay: kept(row.hoursADay, asset?.hoursADay, null),
    itemFittedOn: kept(row.itemFittedOn, asset?.itemFittedOn, null),
  };
}

function refuseForRecords(target: RegisterTarget, asset: HeldAsset): CellRemark[] {
  const { firstRecord, lastRecord } = asset;
  if (firstRecord === null || lastRecord === null) return [];
  const remarks: CellRemark[] = [];
  const refuse = (column: string, value: string, reason: string) => remarks.push({ column, value, reason });
  if (target.inServiceOn > firstRecord) {
    refuse(
      'in service',
      target.inServiceOn,
      `The asset has a record on ${firstRecord}, which would lie before.`,
    );
  }
  if (target.retiredOn !== null && target.retiredOn < lastRecord) {
    refuse('retired', target.retiredOn, `The asset has a record on ${lastRecord}, which would lie after.`);
  }
  if (!sameName(target.className, asset.className)) {
    refuse(
      'class',
      target.className,
      `The asset has records as “${asset.className}” and stays in that class.`,
    );
  }
  return remarks;
}

function changesFor(target: RegisterTarget, asset: HeldAsset): CellRemark[] {
  const renamed = (before: string | null, after: string | null) => (sameName(before, after) ? before : after);
  return changesOf([
    ['site', asset.site, renamed(asset.site, target.site)],
    ['area', asset.area, renamed(asset.area, target.area)],
    ['class', asset.className, renamed(asset.className, target.className)],
    ['quantity', asset.quantity, target.quantity],
    ['in service', asset.inServiceOn, target.inServiceOn],
    ['watched from', asset.watchedFrom, target.watchedFrom],
    ['watched until', asset.watchedUntil, target.watchedUntil],
    ['retired', asset.retiredOn, target.retiredOn],
    ['hours a day', asset.hoursADay, target.hoursADay],
    ['item fitted', asset.itemFittedOn, target.itemFittedOn],
  ]);
}

async function findAssets(
  trx: Database,
  rows: readonly ReadRow<ReadRegisterRow>[],
  lock: boolean,
): Promise<Map<number, HeldAsset>> {
  const asked = rows.flatMap(({ line, row: { tag } }) => (tag === null ? [] : [{ line, tag }]));
  const found = await trx.raw<{ rows: HeldAsset[] }>(
    `select asked.line, assets.id, asset_classes.name as "className", sites.name as site, areas.name as area,
            assets.quantity, assets.in_service_on as "inServiceOn", assets.watched_from as "watchedFrom",
            assets.watched_until as "watchedUntil", assets.retired_on as "retiredOn",
            assets.duty_hours_per_day as "hoursADay", assets.item_fitted_on as "itemFittedOn",
            days.first as "firstRecord", days.last as "lastRecord"
       from jsonb_to_recordset(?::jsonb) as asked (line integer, tag text)
       join assets on lower(assets.tag) = lower(asked.tag)
       join asset_classes on asset_classes.id = assets.class_id
       join sites on sites.id = assets.site_id
       left join areas on areas.id = assets.area_id
       cross join lateral (
         select min(day) as first, max(day) as last
           from (select failed_on as day from failures where asset_id = assets.id and voided_at is null
                 union all
                 select done_on from planned_work where asset_id = assets.id and voided_at is null) as records
       ) as days
      ${lock ? 'for no key update of assets' : ''}`,
    [JSON.stringify(asked)],
  );
  return new Map(found.rows.map((asset) => [asset.line, asset]));
}

async function findClocks(
  trx: Database,
  rows: readonly ReadRow<ReadRegisterRow>[],
): Promise<Map<string, Clock>> {
  const names = [...new Set(rows.flatMap(({ row: { className } }) => className ?? []))];
  const found = await trx.raw<{ rows: { name: string; clock: Clock }[] }>(
    `select asked.name, asset_classes.clock
       from jsonb_array_elements_text(?::jsonb) as asked (name)
       join asset_classes on lower(asset_classes.name) = lower(asked.name)`,
    [JSON.stringify(names)],
  );
  return new Map(found.rows.map(({ name, clock }) => [name, clock]));
}

/** What one item of a class is called when nobody says: "Supply fan belt" holds a "supply fan belt". */
function singularOf(className: string): string {
  return /^[A-Z][a-z]/.test(className) ? className.charAt(0).toLowerCase() + className.slice(1) : className;
}

function pluralOf(singular: string): string {
  if (/[^aeiou]y$/i.test(singular)) return `${singular.slice(0, -1)}ies`;
  return /(s|x|z|ch|sh)$/i.test(singular) ? `${singular}es` : `${singular}s`;
}
