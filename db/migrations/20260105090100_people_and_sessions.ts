import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table people (
      id uuid primary key default gen_random_uuid(),
      email text not null check (email ~ '^[^@[:space:]]+@[^@[:space:]]+$' and length(email) <= 254),
      name text not null check (btrim(name) <> ''),
      -- Null for a person who cannot sign in with a password.
      password_hash text,
      disabled_at timestamptz,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create unique index people_email_unique on people (lower(email));

    create table person_roles (
      person_id uuid not null references people (id) on delete cascade,
      role text not null check (role in ('technician', 'lead', 'manager', 'admin')),
      primary key (person_id, role)
    );

    -- The sites a technician works at. Leads, managers and admins see all sites and need no row.
    create table person_sites (
      person_id uuid not null references people (id) on delete cascade,
      site_id uuid not null references sites (id) on delete cascade,
      primary key (person_id, site_id)
    );
    create index person_sites_site on person_sites (site_id);

    create table sessions (
      -- SHA-256 of the token in the cookie: a copy of this table lets nobody in.
      token_hash bytea primary key check (octet_length(token_hash) = 32),
      person_id uuid not null references people (id) on delete cascade,
      created_at timestamptz not null default now(),
      last_seen_at timestamptz not null default now(),
      expires_at timestamptz not null,
      revoked_at timestamptz,
      user_agent text check (length(user_agent) <= 400),
      check (expires_at > created_at)
    );
    create index sessions_person on sessions (person_id);
    create index sessions_expires on sessions (expires_at);

    -- Counters of the sign-in limiter; the layout is the one its library writes.
    create table sign_in_limits (
      key varchar(255) primary key,
      points integer not null default 0,
      expire bigint
    );
    create index sign_in_limits_expire on sign_in_limits (expire);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table sign_in_limits;
    drop table sessions;
    drop table person_sites;
    drop table person_roles;
    drop table people;
  `);
}
