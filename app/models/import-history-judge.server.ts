import { DateTime } from 'luxon';
import type { Database } from '../../db/connection';
import type { Effect, OutsideCause } from './failure';
import {
  momentOf,
  plannedKindOf,
  recordIdOf,
  type HistoryContext,
  type HistoryRow,
  type ReadHistoryRow,
} from './import-history-row';
import { changesOf, sameName, type JudgedRow, type ReadRow } from './import-row';
import { findHeldRecords, type HeldRecord } from './import-history-held.server';
import type { CellRemark } from './import-types';

/** A failure or a piece of planned work as a history row would have it. */
export interface HistoryTarget {
  readonly line: number;
  readonly event: HistoryRow['event'];
  readonly id: string;
  /** Whether the record is held already. */
  readonly held: boolean;
  readonly assetId: string;
  readonly on: string;
  readonly at: Date | null;
  readonly mode: string | null;
  readonly effect: Effect | null;
  readonly outsideCause: OutsideCause | null;
  readonly kind: ReturnType<typeof plannedKindOf> | null;
  readonly renewed: boolean;
  readonly itemFittedOn: string | null;
  readonly note: string | null;
  readonly sourceKey: string;
}

/** The asset a row names. */
export interface NamedAsset {
  readonly line: number;
  readonly id: string;
  readonly tag: string;
  readonly classId: string;
  readonly inServiceOn: string;
  readonly retiredOn: string | null;
}

/** The assets that rows name by tag, by line; `lock` keeps them from changing until the transaction ends. */
export async function findNamedAssets(
  trx: Database,
  rows: readonly { line: number; tag: string | null }[],
  lock: boolean,
): Promise<Map<number, NamedAsset>> {
  const asked = rows.filter(({ tag }) => tag !== null);
  const found = await trx.raw<{ rows: NamedAsset[] }>(
    `select asked.line, assets.id, assets.tag, assets.class_id as "classId", assets.in_service_on as "inServiceOn",
            assets.retired_on as "retiredOn"
       from jsonb_to_recordset(?::jsonb) as asked (line integer, tag text)
       join assets on lower(assets.tag) = lower(asked.tag)
      ${lock ? 'for share of assets' : ''}`,
    [JSON.stringify(asked)],
  );
  return new Map(found.rows.map((asset) => [asset.line, asset]));
}

/** Holds history rows against the assets they name and the records already held under their keys. */
export async function judgeHistory(
  trx: Database,
  rows: readonly ReadRow<ReadHistoryRow & { sourceKey: string }>[],
  assets: ReadonlyMap<number, NamedAsset>,
  context: HistoryContext,
): Promise<JudgedRow<HistoryRow, HistoryTarget>[]> {
  const held = await findHeldRecords(
    trx,
    rows.map(({ row }) => row.sourceKey),
  );
  return rows.map(({ line, row: read, remarks }) => {
    const asset = assets.get(line);
    const problems = [...remarks, ...refuseForAsset(read, asset)];
    const row = completeRow(read);
    if (row) problems.push(...refuseOtherEvent(row, held));
    if (row === null || asset === undefined || problems.length > 0) {
      return { line, status: 'rejected', remarks: problems, row: null, target: null };
    }
    const record = held.get(heldKey(row.event, row.sourceKey));
    if (record?.voided) return { line, status: 'unchanged', remarks: [voidedRemark], row, target: null };
    const target = targetOf(line, row, asset, record, context.timeZone);
    if (!record) return { line, status: 'new', remarks: [], row, target };
    const changes = changesFor(target, asset, record, context.timeZone);
    if (changes.length === 0) return { line, status: 'unchanged', remarks: [], row, target: null };
    return { line, status: 'changed', remarks: changes, row, target };
  });
}

const voidedRemark: CellRemark = {
  column: '',
  value: '',
  reason: 'Voided in Intervale; it is left as it is.',
};

function refuseForAsset(read: ReadHistoryRow, asset: NamedAsset | undefined): CellRemark[] {
  const { tag, on, itemFittedOn } = read;
  if (tag === null) return [];
  if (!asset) {
    return [
      {
        column: 'tag',
        value: tag,
        reason: 'No asset has this tag. Import the register first, or correct the tag.',
      },
    ];
  }
  const remarks: CellRemark[] = [];
  const refuse = (column: string, value: string, reason: string) => remarks.push({ column, value, reason });
  if (on && on < asset.inServiceOn) {
    refuse('date', on, `This lies before the asset went into service on ${asset.inServiceOn}.`);
  }
  if (on && asset.retiredOn !== null && on > asset.retiredOn) {
    refuse('date', on, `This lies after the asset was retired on ${asset.retiredOn}.`);
  }
  if (itemFittedOn && itemFittedOn < asset.inServiceOn) {
    refuse(
      'item fitted',
      itemFittedOn,
      `This lies before the asset went into service on ${asset.inServiceOn}.`,
    );
  }
  return remarks;
}

function completeRow(read: ReadHistoryRow & { sourceKey: string }): HistoryRow | null {
  const { tag, on, event, result } = read;
  if (tag === null || on === null || event === null || result === null) return null;
  const { time, mode, outsideCause, kind, itemFittedOn, note, record, sourceKey } = read;
  return { tag, on, time, event, result, mode, outsideCause, kind, itemFittedOn, note, record, sourceKey };
}

function refuseOtherEvent(row: HistoryRow, held: ReadonlyMap<string, HeldRecord>): CellRemark[] {
  const other = row.event === 'failure' ? 'planned work' : 'failure';
  const record = held.get(heldKey(other, row.sourceKey));
  if (row.record === null || !record || record.voided) return [];
  const reason = `Record ${row.record} is held as ${other === 'failure' ? 'a failure' : other}. Void that one first.`;
  return [{ column: 'event', value: row.event, reason }];
}

function heldKey(event: HistoryRow['event'], sourceKey: string): string {
  return `${event} ${sourceKey}`;
}

function targetOf(
  line: number,
  row: HistoryRow,
  asset: NamedAsset,
  record: HeldRecord | undefined,
  timeZone: string,
): HistoryTarget {
  const kept = <Value>(given: Value | undefined, held: Value | undefined): Value | null =>
    (given === undefined ? held : given) ?? null;
  const failure = row.event === 'failure';
  const sameClass = record?.classId === asset.classId;
  const heldKind =
    row.kind === undefined && record?.renewed === (row.result === 'renewed') ? record.kind : null;
  const heldAt = row.time === undefined && record?.on === row.on ? record.at : null;
  return {
    line,
    event: row.event,
    id: record?.id ?? recordIdOf(row.event, row.sourceKey),
    held: record !== undefined,
    assetId: asset.id,
    on: row.on,
    at: row.time ? momentOf(row.on, row.time, timeZone) : heldAt,
    mode: failure ? kept(row.mode, sameClass ? record.mode : null) : null,
    effect: failure ? (row.result === 'renewed' ? 'renewed' : 'patched') : null,
    outsideCause: failure ? kept(row.outsideCause, record?.outsideCause) : null,
    kind: failure ? null : (heldKind ?? plannedKindOf(row)),
    renewed: row.result === 'renewed',
    itemFittedOn: kept(row.itemFittedOn, record?.itemFittedOn),
    note: kept(row.note, record?.note),
    sourceKey: row.sourceKey,
  };
}

function changesFor(
  target: HistoryTarget,
  asset: NamedAsset,
  record: HeldRecord,
  timeZone: string,
): CellRemark[] {
  const timeOf = (at: Date | null) => at && DateTime.fromJSDate(at, { zone: timeZone }).toFormat('HH:mm');
  const resultOf = ({ effect, renewed }: { effect: Effect | null; renewed: boolean }) =>
    effect ?? (renewed ? 'renewed' : 'not renewed');
  return changesOf([
    ['tag', record.tag, record.assetId === asset.id ? record.tag : asset.tag],
    ['date', record.on, target.on],
    ['time', timeOf(record.at), timeOf(target.at)],
    ['result', resultOf(record), resultOf(target)],
    ['failure mode', record.mode, sameName(record.mode, target.mode) ? record.mode : target.mode],
    ['outside cause', record.outsideCause, target.outsideCause],
    ['kind', record.kind, target.kind],
    ['item fitted', record.itemFittedOn, target.itemFittedOn],
    ['note', record.note, target.note],
  ]);
}
