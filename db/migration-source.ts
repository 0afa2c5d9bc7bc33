import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Knex } from 'knex';

const folder = fileURLToPath(new URL('./migrations', import.meta.url));

/**
 * The migrations in `db/migrations`, by name. Imported from here rather than by knex, so that whatever
 * runs this file (tsx, vitest, Playwright) also reads the TypeScript of the migrations.
 */
export const migrationSource: Knex.MigrationSource<string> = {
  getMigrations: async () =>
    readdirSync(folder)
      .filter((name) => name.endsWith('.ts'))
      .sort(),
  getMigrationName: (name) => name,
  getMigration: (name) => import(/* @vite-ignore */ join(folder, name)) as Promise<Knex.Migration>,
};
