import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table imports (
      id uuid primary key default gen_random_uuid(),
      kind text not null check (kind in ('register', 'history')),
      file_name text not null,
      file_size bigint not null check (file_size >= 0),
      file_sha256 bytea not null check (octet_length(file_sha256) = 32),
      -- reading: rows are being staged; previewed: waits for a decision; applied and discarded are ends;
      -- failed: the file could not be read at all, and problem says why.
      state text not null check (state in ('reading', 'previewed', 'applied', 'discarded', 'failed')),
      problem text,
      header jsonb,
      new_rows integer not null default 0,
      changed_rows integer not null default 0,
      unchanged_rows integer not null default 0,
      rejected_rows integer not null default 0,
      created_by uuid not null references people (id),
      created_at timestamptz not null default now(),
      applied_at timestamptz,
      check ((state = 'failed') = (problem is not null)),
      check ((state = 'applied') = (applied_at is not null))
    );
    create index imports_created on imports (created_at desc);

    create table import_rows (
      import_id uuid not null references imports (id) on delete cascade,
      line integer not null check (line >= 1),
      status text not null check (status in ('new', 'changed', 'unchanged', 'rejected')),
      -- The cells as they stood in the file, by heading.
      cells jsonb not null,
      -- The row as it will be written; null for a rejected one.
      parsed jsonb,
      -- [{column, value, reason}] of a rejected row.
      reasons jsonb not null default '[]',
      primary key (import_id, line),
      check ((status = 'rejected') = (parsed is null))
    );
    create index import_rows_status on import_rows (import_id, status, line);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table import_rows;
    drop table imports;
  `);
}
