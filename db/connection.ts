import knex, { type Knex } from 'knex';
import pg from 'pg';

// A date column is a day, not a moment: it stays 'YYYY-MM-DD' instead of becoming midnight somewhere.
pg.types.setTypeParser(pg.types.builtins.DATE, (value) => value);
// Counts and minor units of money fit a double exactly; numeric columns here hold at most 14 digits.
pg.types.setTypeParser(pg.types.builtins.INT8, Number);
pg.types.setTypeParser(pg.types.builtins.NUMERIC, Number);

/** A connection, or a transaction on one: what every model function takes first. */
export type Database = Knex;

/**
 * Opens a pool on a PostgreSQL database.
 *
 * @param url `postgres://…`; defaults to DATABASE_URL.
 * @throws Error when neither is there.
 */
export function openDatabase(url = process.env.DATABASE_URL, maxConnections = 10): Database {
  if (!url) throw new Error('DATABASE_URL is not set: it names the PostgreSQL database to use');
  return knex({
    client: 'pg',
    connection: { connectionString: url, application_name: 'intervale' },
    pool: { min: 0, max: maxConnections },
  });
}

let shared: Database | undefined;

/** The process's one pool, opened on first use. */
export function database(): Database {
  shared ??= openDatabase();
  return shared;
}
