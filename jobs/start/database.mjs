import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { NO_SERVER_MESSAGE, acquireServer } from '../../db/local-server.mjs';
import { findServerBinaries } from '../../db/local/binaries.mjs';
import { PlainError } from '../../db/local/plain-error.mjs';
import { canInstall, installPostgresql } from './debian.mjs';
import { run } from './processes.mjs';

/**
 * @typedef {import('./life.mjs').Life} Life
 * @typedef {import('../../db/local-server.mjs').LocalServer} LocalServer
 * @typedef {object} UsedDatabase
 * @property {string} url
 * @property {LocalServer | undefined} server the private server, when it is ours
 */

/**
 * The private server of this clone, installed and started as needed, released at the end of the run.
 *
 * @param {string} root
 * @param {Life} life
 * @param {{ name: string, throwaway?: boolean }} options
 */
export async function openPrivateServer(root, life, options) {
  if (findServerBinaries().length === 0) {
    if (!canInstall()) throw new PlainError(NO_SERVER_MESSAGE);
    await installPostgresql(life.signal);
  }
  const server = await acquireServer({ root, ...options, signal: life.signal });
  life.onEnd(() => server.release(life.hurry));
  return server;
}

/**
 * The database to work on: DATABASE_URL, else the private one.
 *
 * @param {string} root
 * @param {Life} life
 * @returns {Promise<UsedDatabase>}
 */
export async function obtainDatabase(root, life) {
  const given = process.env.DATABASE_URL;
  if (given) return { url: given, server: undefined };
  const server = await openPrivateServer(root, life, { name: 'postgres' });
  if (server.outside && server.isNew) {
    console.log(`The database’s own user may not enter this folder: its data are in ${server.folder}`);
  }
  return { url: server.url, server };
}

/**
 * Whether there is nothing to migrate and nothing to fill in. Asked directly, since loading all that
 * migrating needs takes longer than the rest of a second start.
 *
 * @param {string} root
 * @param {string} url
 * @param {boolean} demo
 */
async function isUpToDate(root, url, demo) {
  const { default: pg } = await import('pg');
  const client = new pg.Client({ connectionString: url });
  try {
    await client.connect();
    const done = await client.query('select name from knex_migrations order by name');
    const files = readdirSync(join(root, 'db', 'migrations')).filter((name) => name.endsWith('.ts'));
    if (files.sort().join() !== done.rows.map(({ name }) => name).join()) return false;
    return !demo || (await client.query('select from people limit 1')).rowCount === 1;
  } catch {
    // Not reached, or never migrated: the migration proper tells which.
    return false;
  } finally {
    await client.end().catch(() => {});
  }
}

/**
 * Brings a database to the newest schema.
 *
 * @param {string} root
 * @param {string} url
 * @param {{ signal: AbortSignal, demo: boolean }} options `demo`: fill it with the demo if nobody is in it yet
 */
export async function migrate(root, url, { signal, demo }) {
  if (await isUpToDate(root, url, demo)) return;
  const args = ['--import', 'tsx', 'db/migrate.ts', ...(demo ? ['--demo-if-empty'] : [])];
  const env = { ...process.env, DATABASE_URL: url };
  if ((await run(process.execPath, args, { cwd: root, env, signal })) !== 0) {
    throw new PlainError('The database could not be brought up to date (see above).');
  }
}
