import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table asset_classes (
      id uuid primary key default gen_random_uuid(),
      name text not null check (btrim(name) <> ''),
      -- What one item is called in a sentence: "seal", "seals".
      item_singular text not null check (btrim(item_singular) <> ''),
      item_plural text not null check (btrim(item_plural) <> ''),
      clock text not null default 'calendar-days' check (clock in ('calendar-days', 'operating-hours')),
      -- 1 matters most.
      criticality smallint not null default 3 check (criticality between 1 and 4),
      statutory boolean not null default false,
      endangers_people boolean not null default false,
      -- A failure nobody notices until it is looked for.
      hidden_failures boolean not null default false,
      -- Minor units of the organisation's currency; null when nobody has said.
      planned_cost_minor bigint check (planned_cost_minor >= 0),
      failure_cost_minor bigint check (failure_cost_minor >= 0),
      version integer not null default 1,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create unique index asset_classes_name_unique on asset_classes (lower(name));

    create table failure_modes (
      id uuid primary key default gen_random_uuid(),
      class_id uuid not null references asset_classes (id) on delete restrict,
      name text not null check (btrim(name) <> ''),
      created_at timestamptz not null default now(),
      unique (id, class_id)
    );
    create unique index failure_modes_class_name_unique on failure_modes (class_id, lower(name));

    create table assets (
      id uuid primary key default gen_random_uuid(),
      class_id uuid not null references asset_classes (id) on delete restrict,
      site_id uuid not null references sites (id) on delete restrict,
      area_id uuid,
      tag text not null check (btrim(tag) <> '' and length(tag) <= 60),
      quantity integer not null default 1 check (quantity between 1 and 100000),
      in_service_on date not null,
      -- Since when failures of this asset are recorded; what came before is unknown, not nothing.
      watched_from date not null,
      watched_until date,
      retired_on date,
      -- When the item in place at watched_from had been fitted, if anybody knows.
      item_fitted_on date,
      duty_hours_per_day numeric(6, 4) check (duty_hours_per_day > 0 and duty_hours_per_day <= 24),
      version integer not null default 1,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      unique (id, class_id),
      foreign key (area_id, site_id) references areas (id, site_id),
      constraint assets_watch_after_service check (watched_from >= in_service_on),
      constraint assets_watch_has_length check (watched_until > watched_from),
      constraint assets_retired_after_service check (retired_on > in_service_on),
      constraint assets_fitted_before_watch check (item_fitted_on between in_service_on and watched_from)
    );
    create unique index assets_tag_unique on assets (lower(tag));
    create index assets_class on assets (class_id, id);
    create index assets_site_class on assets (site_id, class_id);
    create index assets_area on assets (area_id);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table assets;
    drop table failure_modes;
    drop table asset_classes;
  `);
}
