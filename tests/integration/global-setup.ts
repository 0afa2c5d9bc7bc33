import { fileURLToPath } from 'node:url';
import { acquireServer } from '../../db/local-server.mjs';
import { prepareDatabase } from '../../db/migrate';
import { createDatabase, dropDatabase, siblingUrl, TEMPLATE_VARIABLE } from '../support/test-database';

/**
 * Before the suite: a server (that of DATABASE_URL, else a throwaway one of our own) and on it one migrated
 * database, of which each test file takes a copy.
 *
 * @returns what undoes it
 */
export default async function setup(): Promise<() => Promise<void>> {
  const root = fileURLToPath(new URL('../..', import.meta.url));
  const server = process.env.DATABASE_URL
    ? undefined
    : await acquireServer({ root, name: 'test-postgres', throwaway: true });
  if (server) process.env.DATABASE_URL = server.url;
  const template = await createDatabase('template');
  await prepareDatabase(siblingUrl(template));
  process.env[TEMPLATE_VARIABLE] = template;
  return async () => {
    await dropDatabase(template);
    await server?.release();
  };
}
