import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    create table audit_entries (
      id bigint generated always as identity primary key,
      at timestamptz not null default now(),
      -- Null for the product's own jobs.
      person_id uuid references people (id),
      action text not null,
      subject text not null,
      subject_id text not null,
      before jsonb,
      after jsonb
    );
    create index audit_entries_subject on audit_entries (subject, subject_id, id desc);
    create index audit_entries_at on audit_entries (at desc);
    create index audit_entries_person on audit_entries (person_id, at desc);

    create function refuse_audit_change() returns trigger language plpgsql as $$
    begin
      raise exception 'the audit trail is only ever added to' using errcode = 'restrict_violation';
    end $$;
    create trigger audit_entries_append_only before update or delete on audit_entries
      for each row execute function refuse_audit_change();
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.raw(`
    drop table audit_entries;
    drop function refuse_audit_change();
  `);
}
