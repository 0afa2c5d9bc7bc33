import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { migrationSource } from '../../db/migration-source';
import { addSite } from '../support/people';
import { addAsset, addClass, addFailure } from '../support/records';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

let test: TestDatabase;
beforeAll(async () => {
  test = await createTestDatabase({ migrated: false });
});
afterAll(() => test.drop());

const config = { migrationSource };

/** Everything the schema is made of, in words that compare. */
async function schema(): Promise<string[]> {
  const { rows } = await test.database.raw<{ rows: { line: string }[] }>(`
    select 'column ' || table_name || '.' || column_name || ' ' || data_type || ' ' || is_nullable as line
      from information_schema.columns where table_schema = 'public' and table_name not like 'knex%'
    union all
    select 'constraint ' || conrelid::regclass || ' ' || conname || ' ' || pg_get_constraintdef(oid)
      from pg_constraint
     where connamespace = 'public'::regnamespace and conrelid <> 0 and conrelid::regclass::text not like 'knex%'
    union all
    select 'index ' || indexdef from pg_indexes where schemaname = 'public' and tablename not like 'knex%'
    union all
    select 'trigger ' || tgrelid::regclass || ' ' || tgname from pg_trigger where not tgisinternal
    union all
    select 'function ' || proname from pg_proc where pronamespace = 'public'::regnamespace
    order by 1`);
  return rows.map(({ line }) => line);
}

describe('the migrations', () => {
  it('go up, all the way down, and up again to the same schema', async () => {
    await test.database.migrate.latest(config);
    const first = await schema();
    expect(first.length).toBeGreaterThan(100);
    await test.database.migrate.rollback(config, true);
    expect(await schema()).toEqual([]);
    await test.database.migrate.latest(config);
    expect(await schema()).toEqual(first);
  });

  it('leave an index for every foreign key, but for those to people and imports, which are never deleted', async () => {
    const { rows } = await test.database.raw<{ rows: { key: string }[] }>(`
      select conrelid::regclass || ' (' || (select string_agg(attname, ', ') from pg_attribute
               where attrelid = conrelid and attnum = any (conkey)) || ')' as key
        from pg_constraint c
       where contype = 'f' and connamespace = 'public'::regnamespace
         and confrelid not in ('people'::regclass, 'imports'::regclass)
         and not exists (select from pg_index i where i.indrelid = c.conrelid
                          and (i.indkey::int2[])[0] = any (c.conkey))
       order by 1`);
    expect(rows.map(({ key }) => key)).toEqual([]);
  });
});

describe('the database itself refuses', () => {
  let asset: { assetId: string; classId: string };
  beforeAll(async () => {
    const { database: db } = test;
    const siteId = await addSite(db, 'Orrin Library');
    const classId = await addClass(db, 'Circulation pump');
    const assetId = await addAsset(db, { classId, siteId }, 'OL-PUMP-1', { retired_on: '2026-01-31' });
    asset = { assetId, classId };
  });

  it.each([
    ['a failure before the asset was in service', '2023-12-31', 'record_before_service'],
    ['a failure after it was retired', '2026-02-01', 'record_after_retirement'],
  ])('%s', async (_, day, constraint) => {
    await expect(addFailure(test.database, asset, day)).rejects.toMatchObject({ constraint });
  });

  it('a failure in the future', async () => {
    const later = await addAsset(
      test.database,
      { classId: asset.classId, siteId: (await test.database('sites').first('id'))!.id },
      'OL-PUMP-2',
    );
    await expect(addFailure(test.database, { ...asset, assetId: later }, '2999-01-01')).rejects.toMatchObject(
      { constraint: 'record_in_future' },
    );
  });

  it('deleting a failure, moving an asset past its records, and changing the audit trail', async () => {
    const { database: db } = test;
    const id = await addFailure(db, asset, '2025-05-05');
    await expect(db('failures').where({ id }).delete()).rejects.toThrow(/never deleted/);
    await expect(
      db('assets')
        .where({ id: asset.assetId })
        .update({ in_service_on: '2025-06-01', watched_from: '2025-06-01' }),
    ).rejects.toMatchObject({ constraint: 'asset_dates_exclude_records' });
    await db('audit_entries').insert({ action: 'void', subject: 'failure', subject_id: id });
    await expect(db('audit_entries').update({ action: 'other' })).rejects.toThrow(/only ever added to/);
  });

  it('a watch without length, a duty of 0, a void without a reason', async () => {
    const { database: db } = test;
    const place = { classId: asset.classId, siteId: (await db('sites').first('id'))!.id as string };
    await expect(addAsset(db, place, 'A', { watched_until: '2024-01-01' })).rejects.toMatchObject({
      constraint: 'assets_watch_has_length',
    });
    await expect(addAsset(db, place, 'B', { duty_hours_per_day: 0 })).rejects.toThrow(/duty_hours_per_day/);
    await expect(addFailure(db, asset, '2025-05-06', { voided_at: new Date() })).rejects.toMatchObject({
      constraint: 'failures_void_complete',
    });
  });
});
