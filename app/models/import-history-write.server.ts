import type { Database } from '../../db/connection';
import type { HistoryTarget } from './import-history-judge.server';

interface WriteContext {
  readonly importId: string;
  readonly personId: string;
  readonly now: Date;
}

const recordset = `jsonb_to_recordset(?::jsonb) as target (
  line integer, event text, id uuid, held boolean, "assetId" uuid, "on" date, at timestamptz, mode text, effect text,
  "outsideCause" text, kind text, renewed boolean, "itemFittedOn" date, note text, "sourceKey" text)`;

const withMode = `
  join assets on assets.id = target."assetId"
  left join failure_modes on failure_modes.class_id = assets.class_id and lower(failure_modes.name) = lower(target.mode)`;

// Records of one day keep the order they had in the file: it is the order they are taken in later.
const entered = `?::timestamptz + target.line * interval '1 microsecond'`;

/** Writes failures and planned work, new and changed, and the failure modes they need. Every change goes to the audit trail. */
export async function writeHistory(
  trx: Database,
  targets: readonly HistoryTarget[],
  context: WriteContext,
): Promise<void> {
  const failures = targets.filter(({ event }) => event === 'failure');
  const planned = targets.filter(({ event }) => event === 'planned work');
  await addModes(trx, failures);
  await addFailures(trx, part(failures, false), context);
  await changeFailures(trx, part(failures, true), context);
  await addPlannedWork(trx, part(planned, false), context);
  await changePlannedWork(trx, part(planned, true), context);
}

/** Rows for a statement as JSON; null when there are none, and the statement need not run. */
function part(targets: readonly HistoryTarget[], held: boolean): string | null {
  const rows = targets.filter((target) => target.held === held);
  return rows.length > 0 ? JSON.stringify(rows) : null;
}

async function addModes(trx: Database, failures: readonly HistoryTarget[]): Promise<void> {
  const named = failures.filter(({ mode }) => mode !== null);
  if (named.length === 0) return;
  await trx.raw(
    `insert into failure_modes (class_id, name)
     select distinct on (assets.class_id, lower(target.mode)) assets.class_id, target.mode
       from ${recordset} join assets on assets.id = target."assetId"
      order by assets.class_id, lower(target.mode), target.line
     on conflict (class_id, lower(name)) do nothing`,
    [JSON.stringify(named)],
  );
}

async function addFailures(trx: Database, json: string | null, context: WriteContext): Promise<void> {
  if (json === null) return;
  const { importId, personId, now } = context;
  await trx.raw(
    `insert into failures (id, asset_id, class_id, mode_id, failed_on, failed_at, effect, outside_cause, item_fitted_on,
                           note, logged_at, logged_by, import_id, source_key, updated_at)
     select target.id, assets.id, assets.class_id, coalesce(failure_modes.merged_into, failure_modes.id), "on", at, effect, "outsideCause", "itemFittedOn",
            note, ${entered}, ?, ?, "sourceKey", ?
       from ${recordset} ${withMode}`,
    [now, personId, importId, now, json],
  );
}

async function changeFailures(
  trx: Database,
  json: string | null,
  { personId, now }: WriteContext,
): Promise<void> {
  if (json === null) return;
  await trx.raw(
    `with before as (
       select failures.* from ${recordset} join failures on failures.id = target.id
     ), after as (
       update failures
          set asset_id = target."assetId", class_id = target.class_id, mode_id = target.mode_id, failed_on = target."on",
              failed_at = target.at, effect = target.effect, outside_cause = target."outsideCause",
              item_fitted_on = target."itemFittedOn",
              item_age = case when target."itemFittedOn" is null then item_age end,
              note = target.note, version = version + 1, updated_at = ?
         from (select target.*, assets.class_id, coalesce(failure_modes.merged_into, failure_modes.id) as mode_id
                 from ${recordset} ${withMode}) as target
        where failures.id = target.id
       returning failures.*
     )
     ${auditChanges('failure')}`,
    [json, now, json, now, personId],
  );
}

async function addPlannedWork(trx: Database, json: string | null, context: WriteContext): Promise<void> {
  if (json === null) return;
  const { importId, personId, now } = context;
  await trx.raw(
    `insert into planned_work (id, asset_id, class_id, kind, renewed, done_on, done_at, item_fitted_on, note,
                               logged_at, logged_by, import_id, source_key, updated_at)
     select target.id, assets.id, assets.class_id, kind, renewed, "on", at, "itemFittedOn", note,
            ${entered}, ?, ?, "sourceKey", ?
       from ${recordset} join assets on assets.id = target."assetId"`,
    [now, personId, importId, now, json],
  );
}

async function changePlannedWork(
  trx: Database,
  json: string | null,
  { personId, now }: WriteContext,
): Promise<void> {
  if (json === null) return;
  await trx.raw(
    `with before as (
       select planned_work.* from ${recordset} join planned_work on planned_work.id = target.id
     ), after as (
       update planned_work
          set asset_id = target."assetId", class_id = target.class_id,
              task_id = case when planned_work.class_id = target.class_id then task_id end,
              kind = target.kind, renewed = target.renewed, done_on = target."on", done_at = target.at,
              item_fitted_on = target."itemFittedOn", note = target.note, version = version + 1, updated_at = ?
         from (select target.*, assets.class_id from ${recordset} join assets on assets.id = target."assetId") as target
        where planned_work.id = target.id
       returning planned_work.*
     )
     ${auditChanges('planned-work')}`,
    [json, now, json, now, personId],
  );
}

function auditChanges(subject: 'failure' | 'planned-work'): string {
  return `insert into audit_entries (at, person_id, action, subject, subject_id, before, after)
     select ?, ?, 'import', '${subject}', after.id::text, to_jsonb(before), to_jsonb(after)
       from after join before on before.id = after.id`;
}
