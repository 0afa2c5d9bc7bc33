import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table job_runs (
      id uuid primary key default gen_random_uuid(),
      job text not null,
      -- The last day whose records the run takes in.
      as_of date,
      -- A run that is killed stays 'running' until the next one finds it and marks it 'abandoned'.
      state text not null check (state in ('running', 'finished', 'failed', 'abandoned')),
      started_at timestamptz not null default now(),
      finished_at timestamptz,
      classes_computed integer not null default 0,
      problem text,
      check ((state = 'running') = (finished_at is null))
    );
    create index job_runs_job_started on job_runs (job, started_at desc);
    create index job_runs_finished on job_runs (job, as_of) where state = 'finished';

    -- What a run could not compute, class by class.
    create table job_run_problems (
      run_id uuid not null references job_runs (id) on delete cascade,
      class_id uuid not null references asset_classes (id) on delete cascade,
      reason text not null,
      primary key (run_id, class_id)
    );
    create index job_run_problems_class on job_run_problems (class_id);

    create table assessments (
      id uuid primary key default gen_random_uuid(),
      run_id uuid not null references job_runs (id) on delete cascade,
      class_id uuid not null references asset_classes (id) on delete cascade,
      as_of date not null,
      verdict text not null check (verdict in ('wear-out', 'memoryless', 'early-life', 'undecided')),
      trend text not null check (trend in ('rising', 'falling', 'level', 'unclear')),
      failures integer not null check (failures >= 0),
      caution_codes text[] not null,
      -- The few numbers that lists show and sort by.
      summary jsonb not null,
      -- Everything else that went into the assessment and came out of it; its shape is checked on reading.
      detail jsonb not null,
      unique (run_id, class_id)
    );
    create index assessments_class_night on assessments (class_id, as_of desc);
    create index assessments_night on assessments (as_of);

    -- The assessment in force: set when a run finishes whole, so that half a run changes nothing.
    alter table asset_classes add column current_assessment_id uuid references assessments (id) on delete set null;
    create index asset_classes_current_assessment on asset_classes (current_assessment_id);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    alter table asset_classes drop column current_assessment_id;
    drop table assessments;
    drop table job_run_problems;
    drop table job_runs;
  `);
}
