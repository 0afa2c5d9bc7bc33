import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { openDatabase, type Database } from '../../db/connection';
import { prepareDatabase } from '../../db/migrate';

export interface TestDatabase {
  url: string;
  database: Database;
  /** Closes the pool and drops the database, whoever is still connected. */
  drop(): Promise<void>;
}

/** Set by the suite's global setup: a migrated database on the same server, to copy instead of migrating again. */
export const TEMPLATE_VARIABLE = 'TEST_TEMPLATE_DATABASE';

function serverUrl(): string {
  const url = process.env.DATABASE_URL;
  if (!url) throw new Error('DATABASE_URL is not set: it names the PostgreSQL server to test on');
  return url;
}

async function onServer(statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: serverUrl() });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}

/** The URL of another database on the server of DATABASE_URL. */
export function siblingUrl(name: string): string {
  const url = new URL(serverUrl());
  url.pathname = `/${name}`;
  return url.href;
}

/** Creates an empty database, or a copy of `template`, and gives its name. */
export async function createDatabase(purpose: string, template?: string): Promise<string> {
  const name = `intervale_${purpose}_${randomBytes(6).toString('hex')}`;
  await onServer(`create database ${name}${template ? ` template ${template}` : ''}`);
  return name;
}

/** Drops a database that `createDatabase` made. */
export async function dropDatabase(name: string): Promise<void> {
  await onServer(`drop database if exists ${name} with (force)`);
}

/**
 * A database of a suite's own on the server of DATABASE_URL, at the newest schema and empty.
 *
 * @param options `migrated: false` for one without any table
 */
export async function createTestDatabase(options: { migrated?: boolean } = {}): Promise<TestDatabase> {
  const migrated = options.migrated ?? true;
  const template = migrated ? process.env[TEMPLATE_VARIABLE] : undefined;
  const name = await createDatabase('test', template);
  const url = siblingUrl(name);
  if (migrated && !template) await prepareDatabase(url);
  const database = openDatabase(url, 5);
  return {
    url,
    database,
    async drop() {
      await database.destroy();
      await dropDatabase(name);
    },
  };
}
