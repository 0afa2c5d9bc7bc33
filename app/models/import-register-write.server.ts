import type { Database } from '../../db/connection';
import type { RegisterTarget } from './import-register-judge.server';

const recordset = `jsonb_to_recordset(?::jsonb) as target (
  line integer, id uuid, tag text, site text, area text, "className" text, "newClass" jsonb, quantity integer,
  "inServiceOn" date, "watchedFrom" date, "watchedUntil" date, "retiredOn" date, "hoursADay" numeric,
  "itemFittedOn" date)`;

const named = `
  join sites on lower(sites.name) = lower(target.site)
  join asset_classes on lower(asset_classes.name) = lower(target."className")
  left join areas on areas.site_id = sites.id and lower(areas.name) = lower(target.area)`;

/** Writes assets, new and changed, and the sites, areas and classes they need. Every change goes to the audit trail. */
export async function writeRegister(
  trx: Database,
  targets: readonly RegisterTarget[],
  { personId, now }: { personId: string; now: Date },
): Promise<void> {
  const json = JSON.stringify(targets);
  await trx.raw(
    `insert into sites (name) select distinct on (lower(site)) site from ${recordset}
      order by lower(site), line on conflict (lower(name)) do nothing`,
    [json],
  );
  await trx.raw(
    `insert into areas (site_id, name)
     select distinct on (sites.id, lower(area)) sites.id, area
       from ${recordset} join sites on lower(sites.name) = lower(target.site)
      where area is not null order by sites.id, lower(area), line
     on conflict (site_id, lower(name)) do nothing`,
    [json],
  );
  await trx.raw(
    `insert into asset_classes (name, clock, item_singular, item_plural)
     select distinct on (lower("className")) "className", "newClass" ->> 'clock', "newClass" ->> 'item', "newClass" ->> 'items'
       from ${recordset} where "newClass" is not null and "newClass" <> 'null' order by lower("className"), line
     on conflict (lower(name)) do nothing`,
    [json],
  );
  await trx.raw(
    `insert into assets (class_id, site_id, area_id, tag, quantity, in_service_on, watched_from, watched_until,
                         retired_on, duty_hours_per_day, item_fitted_on, created_at, updated_at)
     select asset_classes.id, sites.id, areas.id, target.tag, target.quantity, "inServiceOn", "watchedFrom",
            "watchedUntil", "retiredOn", "hoursADay", "itemFittedOn", ?, ?
       from ${recordset} ${named} where target.id is null`,
    [now, now, json],
  );
  await trx.raw(
    `with before as (
       select assets.* from ${recordset} join assets on assets.id = target.id
     ), after as (
       update assets
          set class_id = asset_classes.id, site_id = sites.id, area_id = areas.id, quantity = target.quantity,
              in_service_on = "inServiceOn", watched_from = "watchedFrom", watched_until = "watchedUntil",
              retired_on = "retiredOn", duty_hours_per_day = "hoursADay", item_fitted_on = "itemFittedOn",
              version = version_before + 1, updated_at = ?
         from (select target.*, held.version as version_before
                 from ${recordset} join assets as held on held.id = target.id) as target ${named}
        where assets.id = target.id
       returning assets.*
     )
     insert into audit_entries (at, person_id, action, subject, subject_id, before, after)
     select ?, ?, 'import', 'asset', after.id::text, to_jsonb(before), to_jsonb(after)
       from after join before on before.id = after.id`,
    [json, now, json, now, personId],
  );
}
