import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table maintenance_tasks (
      id uuid primary key default gen_random_uuid(),
      class_id uuid not null references asset_classes (id) on delete restrict,
      name text not null check (btrim(name) <> ''),
      kind text not null check (kind in ('replace', 'restore', 'inspect', 'service', 'test')),
      interval_days integer check (interval_days > 0),
      interval_hours numeric(12, 2) check (interval_hours > 0),
      statutory_reference text,
      cost_minor bigint check (cost_minor >= 0),
      starts_on date not null,
      ends_on date,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      unique (id, class_id),
      constraint maintenance_tasks_one_interval check (num_nonnulls(interval_days, interval_hours) = 1),
      constraint maintenance_tasks_ends_after_start check (ends_on > starts_on)
    );
    create index maintenance_tasks_class on maintenance_tasks (class_id);

    create table failures (
      -- Made by the client, so that the same entry sent twice is stored once.
      id uuid primary key,
      asset_id uuid not null,
      class_id uuid not null,
      mode_id uuid,
      failed_on date not null,
      -- The moment, where the time of day is known.
      failed_at timestamptz,
      effect text not null check (effect in ('renewed', 'patched')),
      outside_cause text check (outside_cause in ('struck', 'flooded', 'power', 'vandalism', 'weather', 'other')),
      -- What the record itself says of the failed item's age: one of the two, or neither.
      item_fitted_on date,
      item_age numeric(14, 4) check (item_age >= 0),
      note text check (length(note) <= 4000),
      logged_at timestamptz not null default now(),
      logged_by uuid references people (id),
      import_id uuid references imports (id),
      source_key text,
      voided_at timestamptz,
      voided_by uuid references people (id),
      void_reason text,
      version integer not null default 1,
      updated_at timestamptz not null default now(),
      foreign key (asset_id, class_id) references assets (id, class_id) on update cascade,
      foreign key (mode_id, class_id) references failure_modes (id, class_id),
      constraint failures_one_age check (num_nonnulls(item_fitted_on, item_age) <= 1),
      constraint failures_fitted_before_failed check (item_fitted_on <= failed_on),
      constraint failures_void_complete check (
        num_nonnulls(voided_at, void_reason) in (0, 2) and (voided_at is not null or voided_by is null)
      )
    );
    create index failures_class_time on failures (class_id, asset_id, failed_on, logged_at, id);
    create index failures_mode on failures (mode_id);
    create index failures_asset_time on failures (asset_id, failed_on desc);
    create index failures_logged_by on failures (logged_by, logged_at desc);
    create index failures_import on failures (import_id) where import_id is not null;
    create unique index failures_source_key_unique on failures (source_key) where source_key is not null;

    create table planned_work (
      id uuid primary key,
      asset_id uuid not null,
      class_id uuid not null,
      task_id uuid,
      kind text not null check (kind in ('replace', 'restore', 'inspect', 'service', 'test')),
      -- Whether a new or as-good-as-new item is in place afterwards.
      renewed boolean not null,
      done_on date not null,
      done_at timestamptz,
      -- When the item that came out had been fitted, if the record says so.
      item_fitted_on date,
      note text check (length(note) <= 4000),
      logged_at timestamptz not null default now(),
      logged_by uuid references people (id),
      import_id uuid references imports (id),
      source_key text,
      voided_at timestamptz,
      voided_by uuid references people (id),
      void_reason text,
      version integer not null default 1,
      updated_at timestamptz not null default now(),
      foreign key (asset_id, class_id) references assets (id, class_id) on update cascade,
      foreign key (task_id, class_id) references maintenance_tasks (id, class_id),
      constraint planned_work_renewal_kinds check (not renewed or kind in ('replace', 'restore')),
      constraint planned_work_fitted_before_done check (item_fitted_on <= done_on),
      constraint planned_work_void_complete check (
        num_nonnulls(voided_at, void_reason) in (0, 2) and (voided_at is not null or voided_by is null)
      )
    );
    create index planned_work_class_time on planned_work (class_id, asset_id, done_on, logged_at, id);
    create index planned_work_asset_time on planned_work (asset_id, done_on desc);
    create index planned_work_task on planned_work (task_id) where task_id is not null;
    create index planned_work_import on planned_work (import_id) where import_id is not null;
    create unique index planned_work_source_key_unique on planned_work (source_key) where source_key is not null;

    -- A record outside its asset's service, or in the future, is refused by the database itself. The
    -- future is judged a day generously here, since a date has no time zone; the application is exact.
    create function check_record_date() returns trigger language plpgsql as $$
    declare
      asset assets%rowtype;
      day date;
    begin
      day := case tg_table_name when 'failures' then (to_jsonb(new) ->> 'failed_on')::date
                                else (to_jsonb(new) ->> 'done_on')::date end;
      select * into asset from assets where id = new.asset_id;
      if day < asset.in_service_on then
        raise exception 'record on % before asset % went into service on %', day, asset.tag, asset.in_service_on
          using errcode = 'check_violation', constraint = 'record_before_service';
      end if;
      if asset.retired_on is not null and day > asset.retired_on then
        raise exception 'record on % after asset % was retired on %', day, asset.tag, asset.retired_on
          using errcode = 'check_violation', constraint = 'record_after_retirement';
      end if;
      if day > (now() at time zone 'UTC' + interval '14 hours')::date then
        raise exception 'record on % lies in the future', day
          using errcode = 'check_violation', constraint = 'record_in_future';
      end if;
      return new;
    end $$;
    create trigger failures_check_date before insert or update of failed_on, asset_id on failures
      for each row execute function check_record_date();
    create trigger planned_work_check_date before insert or update of done_on, asset_id on planned_work
      for each row execute function check_record_date();

    -- Moving an asset's dates past its own records would make those records impossible.
    create function check_asset_dates() returns trigger language plpgsql as $$
    begin
      if exists (select from failures where asset_id = new.id and voided_at is null
                   and (failed_on < new.in_service_on or failed_on > new.retired_on))
         or exists (select from planned_work where asset_id = new.id and voided_at is null
                   and (done_on < new.in_service_on or done_on > new.retired_on)) then
        raise exception 'asset % has records outside its new dates', new.tag
          using errcode = 'check_violation', constraint = 'asset_dates_exclude_records';
      end if;
      return new;
    end $$;
    create trigger assets_check_dates before update of in_service_on, retired_on on assets
      for each row execute function check_asset_dates();

    -- Nothing logged is ever deleted: it is voided, and the void can be undone.
    create function refuse_delete() returns trigger language plpgsql as $$
    begin
      raise exception 'rows of % are voided, never deleted', tg_table_name using errcode = 'restrict_violation';
    end $$;
    create trigger failures_never_deleted before delete on failures for each row execute function refuse_delete();
    create trigger planned_work_never_deleted before delete on planned_work for each row execute function refuse_delete();
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop trigger assets_check_dates on assets;
    drop table planned_work;
    drop table failures;
    drop table maintenance_tasks;
    drop function check_asset_dates();
    drop function check_record_date();
    drop function refuse_delete();
  `);
}
