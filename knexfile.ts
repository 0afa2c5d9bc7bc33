import type { Knex } from 'knex';
import { migrationSource } from './db/migration-source';

/** For knex's own command line: `npx tsx node_modules/.bin/knex migrate:status`, with DATABASE_URL set. */
export default {
  client: 'pg',
  connection: process.env.DATABASE_URL,
  migrations: { migrationSource },
} satisfies Knex.Config;
