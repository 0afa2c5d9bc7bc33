import type { Knex } from 'knex';

/** What the third question, metered clocks, groups of items and alarms need. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    alter table organisations
      -- Share of lead times in which the spares held should be enough.
      add column service_level numeric(4, 3) not null default 0.95 check (service_level > 0 and service_level < 1);

    alter table asset_classes
      -- One planned renewal where the whole group is done in one visit.
      add column group_planned_cost_minor bigint check (group_planned_cost_minor >= 0),
      add column spares_lead_time_days integer check (spares_lead_time_days > 0),
      -- Mean availability a hidden function is to have; its test interval follows from it.
      add column required_availability numeric(6, 5) check (required_availability > 0 and required_availability < 1);

    -- How old the items of a quantity asset were when its watch began: so many fitted on a day. Items not
    -- accounted for here are of unknown age.
    create table fitted_items (
      asset_id uuid not null references assets (id) on delete cascade,
      fitted_on date not null,
      count integer not null check (count between 1 and 100000),
      primary key (asset_id, fitted_on)
    );

    -- How many of a quantity asset's items a planned renewal took; null for all of them.
    alter table planned_work add column items integer check (items >= 1);

    create table meter_readings (
      id uuid primary key,
      asset_id uuid not null references assets (id) on delete restrict,
      read_on date not null,
      read_at timestamptz,
      hours numeric(12, 2) not null check (hours >= 0),
      -- The first reading of a new meter: it may be lower than the one before.
      meter_changed boolean not null default false,
      logged_at timestamptz not null default now(),
      logged_by uuid references people (id),
      import_id uuid references imports (id),
      source_key text,
      voided_at timestamptz,
      voided_by uuid references people (id),
      void_reason text,
      version integer not null default 1,
      constraint meter_readings_void_complete check (
        num_nonnulls(voided_at, void_reason) in (0, 2) and (voided_at is not null or voided_by is null)
      )
    );
    create unique index meter_readings_asset_day on meter_readings (asset_id, read_on) where voided_at is null;
    create unique index meter_readings_source_key_unique on meter_readings (source_key) where source_key is not null;
    create index meter_readings_logged_by on meter_readings (logged_by);

    -- A meter only counts up: a reading that goes back needs the word that the meter was changed. It is
    -- compared with the readings before and after it, as they stand on the same meter.
    create function check_meter_reading() returns trigger language plpgsql as $$
    declare
      before meter_readings%rowtype;
      after meter_readings%rowtype;
    begin
      if new.voided_at is not null then return new; end if;
      select * into before from meter_readings
        where asset_id = new.asset_id and read_on < new.read_on and voided_at is null and id <> new.id
        order by read_on desc limit 1;
      select * into after from meter_readings
        where asset_id = new.asset_id and read_on > new.read_on and voided_at is null and id <> new.id
        order by read_on limit 1;
      if not new.meter_changed and before.hours > new.hours then
        raise exception 'reading of % h on % is below % h on %', new.hours, new.read_on, before.hours, before.read_on
          using errcode = 'check_violation', constraint = 'meter_reading_goes_back';
      end if;
      if after.id is not null and not after.meter_changed and after.hours < new.hours then
        raise exception 'reading of % h on % is above % h on %', new.hours, new.read_on, after.hours, after.read_on
          using errcode = 'check_violation', constraint = 'meter_reading_goes_back';
      end if;
      return new;
    end $$;
    create trigger meter_readings_check before insert or update on meter_readings
      for each row execute function check_meter_reading();
    create trigger meter_readings_never_deleted before delete on meter_readings
      for each row execute function refuse_delete();

    -- What is left of all failures so far, so that a night adds only the new ones.
    create table alarm_states (
      class_id uuid primary key references asset_classes (id) on delete cascade,
      as_of date not null,
      failures integer not null check (failures >= 0),
      -- Of the failures taken in, in order: tells whether the past has been changed since.
      fingerprint text not null,
      state jsonb not null
    );

    create table alarms (
      id uuid primary key default gen_random_uuid(),
      class_id uuid not null references asset_classes (id) on delete cascade,
      kind text not null check (kind in ('rate-rising', 'rate-falling', 'old-first', 'young-first')),
      -- The night that raised it.
      raised_as_of date not null,
      raised_at timestamptz not null default now(),
      run_id uuid references job_runs (id) on delete set null,
      -- ln E when raised, counted from the last clearing, and ln E of the whole record.
      log_e float8 not null,
      log_e_total float8 not null,
      failures integer not null,
      cleared_at timestamptz,
      cleared_by uuid references people (id),
      clear_reason text,
      -- ln E of the whole record when it was cleared: a new alarm needs new evidence beyond it.
      log_e_at_clearing float8,
      check (num_nonnulls(cleared_at, clear_reason, log_e_at_clearing) in (0, 3))
    );
    create unique index alarms_one_open on alarms (class_id, kind) where cleared_at is null;
    create index alarms_class on alarms (class_id, raised_at desc);
    create index alarms_run on alarms (run_id);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table alarms;
    drop table alarm_states;
    drop table meter_readings;
    drop function check_meter_reading();
    alter table planned_work drop column items;
    drop table fitted_items;
    alter table asset_classes
      drop column group_planned_cost_minor, drop column spares_lead_time_days, drop column required_availability;
    alter table organisations drop column service_level;
  `);
}
