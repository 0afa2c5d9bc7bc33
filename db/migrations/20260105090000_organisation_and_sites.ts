import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table organisations (
      -- One organisation a database: the key admits a single row.
      singleton boolean primary key default true check (singleton),
      name text not null check (btrim(name) <> ''),
      time_zone text not null default 'UTC',
      currency char(3) not null default 'GBP' check (currency ~ '^[A-Z]{3}$'),
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );

    create table sites (
      id uuid primary key default gen_random_uuid(),
      name text not null check (btrim(name) <> ''),
      created_at timestamptz not null default now()
    );
    create unique index sites_name_unique on sites (lower(name));

    create table areas (
      id uuid primary key default gen_random_uuid(),
      site_id uuid not null references sites (id) on delete restrict,
      name text not null check (btrim(name) <> ''),
      created_at timestamptz not null default now(),
      unique (id, site_id)
    );
    create unique index areas_site_name_unique on areas (site_id, lower(name));
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table areas;
    drop table sites;
    drop table organisations;
  `);
}
