import type { Database } from '../../db/connection';
import type { HistoryTarget } from './import-history-judge.server';

/** A record already held under the key of a row, in the shape history rows have. */
export interface HeldRecord extends Pick<
  HistoryTarget,
  | 'event'
  | 'id'
  | 'assetId'
  | 'on'
  | 'at'
  | 'mode'
  | 'effect'
  | 'outsideCause'
  | 'kind'
  | 'renewed'
  | 'itemFittedOn'
  | 'note'
  | 'sourceKey'
> {
  readonly classId: string;
  readonly tag: string;
  readonly voided: boolean;
}

/** The records held under these keys, by event and key: `failure record:12`. */
export async function findHeldRecords(
  trx: Database,
  sourceKeys: readonly string[],
): Promise<Map<string, HeldRecord>> {
  const found = await trx.raw<{ rows: HeldRecord[] }>(
    `with asked as (select distinct key from jsonb_array_elements_text(?::jsonb) as each (key))
     select 'failure' as event, failures.id, asset_id as "assetId", failures.class_id as "classId", assets.tag,
            failed_on as "on", failed_at as at, failure_modes.name as mode, effect, outside_cause as "outsideCause",
            null as kind, effect = 'renewed' as renewed, failures.item_fitted_on as "itemFittedOn", note,
            source_key as "sourceKey", voided_at is not null as voided
       from asked join failures on failures.source_key = asked.key
       join assets on assets.id = failures.asset_id
       left join failure_modes on failure_modes.id = failures.mode_id
     union all
     select 'planned work', planned_work.id, asset_id, planned_work.class_id, assets.tag, done_on, done_at, null, null,
            null, kind, renewed, planned_work.item_fitted_on, note, source_key, voided_at is not null
       from asked join planned_work on planned_work.source_key = asked.key
       join assets on assets.id = planned_work.asset_id`,
    [JSON.stringify(sourceKeys)],
  );
  return new Map(found.rows.map((record) => [`${record.event} ${record.sourceKey}`, record]));
}
