import { pathToFileURL } from 'node:url';
import pg from 'pg';
import { openDatabase, type Database } from './connection';
import { migrationSource } from './migration-source';

/** An arbitrary number that means "Intervale migrates" among PostgreSQL's advisory locks. */
const MIGRATION_LOCK = 7_240_611;

/**
 * Runs a task while no other process migrates the database. The lock goes with the connection, so a process
 * that is killed leaves none behind.
 */
async function withMigrationLock<T>(url: string, task: () => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url, application_name: 'intervale migration' });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [MIGRATION_LOCK]);
    return await task();
  } finally {
    await client.end();
  }
}

/** Runs all migrations that have not run yet; gives their names. */
async function migrateToLatest(database: Database): Promise<string[]> {
  const config = { migrationSource };
  // Whoever comes here holds our lock: a lock of knex's own can only stem from a run that was killed.
  await database.migrate.forceFreeMigrationsLock(config);
  const [, names] = (await database.migrate.latest(config)) as [number, string[]];
  return names;
}

async function isEmptyOfPeople(database: Database): Promise<boolean> {
  return (await database('people').first('id')) === undefined;
}

/**
 * Brings a database to the newest schema.
 *
 * @param options `demoIfEmpty`: fill it with the demo when there is nobody in it
 * @returns the migrations that ran, and whether the demo was filled in
 */
export async function prepareDatabase(
  url: string,
  options: { demoIfEmpty?: boolean } = {},
): Promise<{ migrations: string[]; seeded: boolean }> {
  return withMigrationLock(url, async () => {
    const database = openDatabase(url, 4);
    try {
      const migrations = await migrateToLatest(database);
      if (!options.demoIfEmpty || !(await isEmptyOfPeople(database))) return { migrations, seeded: false };
      console.log('Filling in the demo …');
      const { seedDemo } = await import('./seeds/demo');
      await seedDemo(database);
      return { migrations, seeded: true };
    } finally {
      await database.destroy();
    }
  });
}

/** `tsx db/migrate.ts [--demo-if-empty]`, on DATABASE_URL. */
async function main(): Promise<void> {
  const url = process.env.DATABASE_URL;
  if (!url) throw new Error('DATABASE_URL is not set: it names the PostgreSQL database to use');
  try {
    const { migrations } = await prepareDatabase(url, {
      demoIfEmpty: process.argv.includes('--demo-if-empty'),
    });
    if (migrations.length > 0) console.log(`Database brought up to date (${migrations.length} migrations).`);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? '';
    // Not reached, no such host, wrong password, no such database: a line says more than a stack.
    if (!/^(E[A-Z]+|28\w{3}|3D000)$/.test(code)) throw error;
    const { host } = new URL(url);
    console.error(`The database at ${host} cannot be used: ${(error as Error).message || code}`);
    process.exitCode = 1;
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) await main();
