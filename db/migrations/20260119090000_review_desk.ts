import type { Knex } from 'knex';

/** What is different since somebody last looked, and changes to a schedule from put forward to followed up. */
export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    -- Searching for a part of a tag over all assets; what begins with the words needs no trigrams.
    create extension if not exists pg_trgm;
    create index assets_tag_trigrams on assets using gin (lower(tag) gin_trgm_ops);
    create index assets_tag_prefix on assets (lower(tag) text_pattern_ops);

    -- What is in force of each class, as lists show and sort it: looked up without wading through all nights.
    create table class_standings (
      class_id uuid primary key references asset_classes (id) on delete cascade,
      assessment_id uuid not null references assessments (id) on delete cascade,
      as_of date not null,
      verdict text not null,
      trend text not null,
      failures integer not null,
      failures_last_year integer not null,
      mean_time float8,
      slope float8,
      caution_codes text[] not null,
      summary jsonb not null
    );
    create index class_standings_assessment on class_standings (assessment_id);

    -- Failures to come of the whole class (no site) or of one site, as of the night in force.
    create table class_outlooks (
      class_id uuid not null references class_standings (class_id) on delete cascade,
      site_id uuid references sites (id) on delete cascade,
      months smallint not null check (months in (1, 3, 12)),
      positions integer not null,
      mean float8 not null,
      low integer not null,
      high integer not null,
      spares integer
    );
    create unique index class_outlooks_class on class_outlooks (class_id, months) where site_id is null;
    create unique index class_outlooks_class_site on class_outlooks (class_id, site_id, months)
      where site_id is not null;
    create index class_outlooks_site on class_outlooks (site_id, months);

    -- What a night made different in one class, each thing once however often that night is run.
    create table class_news (
      id uuid primary key default gen_random_uuid(),
      class_id uuid not null references asset_classes (id) on delete cascade,
      as_of date not null,
      kind text not null check (kind in (
        'alarm-raised', 'verdict-changed', 'trend-changed', 'became-decidable', 'cautions-appeared',
        'proposal-changed', 'follow-up'
      )),
      -- What is different, then what brought it about: a sentence each.
      sentence text not null check (btrim(sentence) <> ''),
      why text not null check (btrim(why) <> ''),
      -- What the change is worth a year, where the night could say; integer minor units.
      money_per_year_minor bigint,
      created_at timestamptz not null default now(),
      unique (class_id, as_of, kind)
    );
    create index class_news_night on class_news (as_of desc);

    create table class_news_seen (
      person_id uuid not null references people (id) on delete cascade,
      news_id uuid not null references class_news (id) on delete cascade,
      seen_at timestamptz not null default now(),
      primary key (person_id, news_id)
    );
    create index class_news_seen_news on class_news_seen (news_id);

    -- A mode merged into another keeps its name for what still calls it so; nothing new is logged with it.
    alter table failure_modes add column merged_into uuid;
    alter table failure_modes add constraint failure_modes_merged_into_fkey
      foreign key (merged_into, class_id) references failure_modes (id, class_id);
    alter table failure_modes add constraint failure_modes_not_into_itself check (merged_into <> id);
    create index failure_modes_merged_into on failure_modes (merged_into) where merged_into is not null;

    -- Corrections made together, so that they can be taken back together.
    create table record_corrections (
      id uuid primary key,
      class_id uuid not null references asset_classes (id) on delete cascade,
      person_id uuid not null references people (id),
      at timestamptz not null default now(),
      correction jsonb not null,
      taken_back_at timestamptz
    );
    create index record_corrections_class on record_corrections (class_id, at desc);

    create table record_correction_items (
      correction_id uuid not null references record_corrections (id) on delete cascade,
      failure_id uuid not null references failures (id),
      -- The version the correction left: taking it back asks that nobody has changed the record since.
      version integer not null,
      before jsonb not null,
      primary key (correction_id, failure_id)
    );
    create index record_correction_items_failure on record_correction_items (failure_id);

    alter table maintenance_tasks
      add column version integer not null default 1,
      -- The task this one took over from, so that a schedule's history can be read.
      add column replaces_task_id uuid references maintenance_tasks (id);
    create index maintenance_tasks_replaces on maintenance_tasks (replaces_task_id)
      where replaces_task_id is not null;

    -- A task with rows here holds for these assets alone; one without holds for its whole class.
    create table maintenance_task_assets (
      task_id uuid not null,
      asset_id uuid not null,
      class_id uuid not null,
      primary key (task_id, asset_id),
      foreign key (task_id, class_id) references maintenance_tasks (id, class_id),
      foreign key (asset_id, class_id) references assets (id, class_id) on update cascade
    );
    create index maintenance_task_assets_asset on maintenance_task_assets (asset_id);

    create table schedule_changes (
      -- Made by the client, so that the same form sent twice puts one change forward.
      id uuid primary key,
      class_id uuid not null references asset_classes (id) on delete restrict,
      -- The renewing task it changes; null where there is none yet.
      task_id uuid,
      action text not null check (action in ('start', 'shorten', 'lengthen', 'stop', 'trial')),
      -- Clock units of the class; null for run to failure.
      from_interval numeric(12, 2) check (from_interval > 0),
      to_interval numeric(12, 2) check (to_interval > 0),
      origin text not null check (origin in ('proposal', 'by-hand')),
      reason text not null check (btrim(reason) <> '' and length(reason) <= 2000),
      -- Expected a year, integer minor units, with the middle 80 %; null where it could not be priced.
      saving_per_year_minor bigint,
      saving_low_minor bigint,
      saving_high_minor bigint,
      -- Share of the draws in which it saves money.
      saving_share float8 check (saving_share between 0 and 1),
      -- The assessment as it was that night: findings and conclusion.
      evidence_as_of date not null,
      evidence jsonb not null,
      state text not null default 'put-forward' check (state in (
        'put-forward', 'asked-back', 'approved', 'declined', 'withdrawn', 'taken-back'
      )),
      put_forward_by uuid not null references people (id),
      put_forward_at timestamptz not null default now(),
      decided_by uuid references people (id),
      decided_at timestamptz,
      takes_effect_on date,
      -- The task made by the approval; null where the change is to stop.
      new_task_id uuid references maintenance_tasks (id),
      taken_back_on date,
      -- The comparison of before and after as of the last night; its shape is checked on reading.
      follow_up jsonb,
      follow_up_as_of date,
      version integer not null default 1,
      foreign key (task_id, class_id) references maintenance_tasks (id, class_id),
      constraint schedule_changes_own_decision check (decided_by <> put_forward_by),
      constraint schedule_changes_saving_whole check (
        num_nonnulls(saving_per_year_minor, saving_low_minor, saving_high_minor) in (0, 3)
      ),
      constraint schedule_changes_decided check (
        (state in ('approved', 'declined', 'taken-back')) = (num_nonnulls(decided_by, decided_at) = 2)
      ),
      constraint schedule_changes_in_effect check (
        (state in ('approved', 'taken-back')) = (takes_effect_on is not null)
      ),
      constraint schedule_changes_taken_back check ((state = 'taken-back') = (taken_back_on is not null)),
      constraint schedule_changes_intervals check (
        case action
          when 'start' then from_interval is null and to_interval is not null
          when 'stop' then from_interval is not null and to_interval is null
          when 'shorten' then to_interval < from_interval
          when 'lengthen' then to_interval > from_interval
          else to_interval is not null
        end
      )
    );
    -- One change of a class waits for a decision at a time.
    create unique index schedule_changes_one_open on schedule_changes (class_id)
      where state in ('put-forward', 'asked-back');
    create index schedule_changes_class on schedule_changes (class_id, put_forward_at desc);
    create index schedule_changes_state on schedule_changes (state, put_forward_at desc);
    create index schedule_changes_task on schedule_changes (task_id);
    create index schedule_changes_new_task on schedule_changes (new_task_id);

    -- The part of the class a trial runs on; none for a change of the whole class.
    create table schedule_change_assets (
      change_id uuid not null references schedule_changes (id) on delete cascade,
      asset_id uuid not null references assets (id),
      primary key (change_id, asset_id)
    );
    create index schedule_change_assets_asset on schedule_change_assets (asset_id);

    -- What was said and done about a change, in order; only ever added to.
    create table schedule_change_steps (
      id bigint generated always as identity primary key,
      change_id uuid not null references schedule_changes (id) on delete cascade,
      step text not null check (step in (
        'put-forward', 'asked-back', 'answered', 'revised', 'approved', 'declined', 'withdrawn', 'taken-back'
      )),
      -- 2,000 of the person's own, and of a revision what it was and is.
      words text check (length(words) <= 2400),
      person_id uuid not null references people (id),
      at timestamptz not null default now()
    );
    create index schedule_change_steps_change on schedule_change_steps (change_id, id);

    -- Law and danger are decided elsewhere: the database itself lets no such change through.
    create function check_change_may_be_approved() returns trigger language plpgsql as $$
    begin
      if new.state = 'approved' and exists (
        select from asset_classes where id = new.class_id and (statutory or endangers_people)
      ) then
        raise exception 'a statutory or people-endangering class is not decided here'
          using errcode = 'check_violation', constraint = 'schedule_changes_marked_class';
      end if;
      return new;
    end $$;
    create trigger schedule_changes_marked before insert or update of state on schedule_changes
      for each row execute function check_change_may_be_approved();
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop index assets_tag_prefix;
    drop index assets_tag_trigrams;
    drop extension pg_trgm;
    drop table schedule_change_steps;
    drop table schedule_change_assets;
    drop table schedule_changes;
    drop function check_change_may_be_approved();
    drop table maintenance_task_assets;
    drop table record_correction_items;
    drop table record_corrections;
    alter table failure_modes drop column merged_into;
    alter table maintenance_tasks drop column replaces_task_id, drop column version;
    drop table class_news_seen;
    drop table class_news;
    drop table class_outlooks;
    drop table class_standings;
  `);
}
