import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { verify } from '@node-rs/argon2';
import { seedDemo } from '../../db/seeds/demo';
import { generateDemo } from '../../fixtures/demo/generate';
import { demoPeople } from '../../fixtures/demo/people';
import { truths } from '../../fixtures/demo/truth';
import { readOrganisation } from '~/models/organisation.server';
import { runNightly } from '../../jobs/nightly';
import type { Database } from '../../db/connection';
import { createTestDatabase, type TestDatabase } from '../support/test-database';

const today = '2026-06-30';
const yesterday = '2026-06-29';

let test: TestDatabase;
let db: Database;

beforeAll(async () => {
  test = await createTestDatabase();
  db = test.database;
  await seedDemo(db, { today });
});
afterAll(() => test.drop());

async function count(table: string): Promise<number> {
  const row = await db(table).count<{ count: number }[]>('* as count').first();
  return Number(row?.count);
}

describe('the demo in the database', () => {
  it('holds every record of the generator', async () => {
    const demo = generateDemo();
    expect(await count('sites')).toBe(5);
    expect(await count('asset_classes')).toBe(14);
    expect(await count('assets')).toBe(demo.assets.length);
    expect(await count('failures')).toBe(demo.failures.length);
    expect(await count('planned_work')).toBe(demo.plannedWork.length);
    const last = await db('failures').max('failed_on as day').first<{ day: string }>();
    expect(last.day <= yesterday).toBe(true);
  });

  it('lets each person in with the password on the list, in one role', async () => {
    for (const { email, password, role } of demoPeople) {
      const person = await db('people').where({ email }).first<{ id: string; password_hash: string }>();
      expect(await verify(person.password_hash, password)).toBe(true);
      expect(await db('person_roles').where({ person_id: person.id }).pluck('role')).toEqual([role]);
    }
  });

  it('refuses a database that somebody uses already, and changes nothing', async () => {
    const before = await count('failures');
    await expect(seedDemo(db, { today })).rejects.toThrow(/empty database/);
    expect(await count('failures')).toBe(before);
    expect(await count('people')).toBe(demoPeople.length);
  });

  it('gets from the nightly job the verdicts that its truth asks for', async () => {
    await runNightly(db, { asOf: yesterday, organisation: await readOrganisation(db) });
    const rows = await db('asset_classes')
      .join('assessments', 'assessments.id', 'asset_classes.current_assessment_id')
      .select<{ name: string; verdict: string; trend: string }[]>('name', 'verdict', 'trend');
    const verdicts = Object.fromEntries(rows.map(({ name, verdict }) => [name, verdict]));
    expect(verdicts).toEqual(
      Object.fromEntries(truths.map(({ className, expectedVerdict }) => [className, expectedVerdict])),
    );
    expect(rows.find(({ name }) => name === 'Water heater element')?.trend).toBe('rising');
  });
});
