import type { Database } from '../../db/connection';

interface Sighting {
  readonly line: number;
  readonly key: string;
}

/**
 * What has been seen so far of a file that is being staged. It is kept in temporary tables of the staging
 * transaction, so that the memory of this process does not grow with the file.
 */
export interface SeenKeys {
  /** Notes keys, and tells for each that was there already the line it was there on, by line. Capitals do not matter. */
  readonly claim: (trx: Database, sightings: readonly Sighting[]) => Promise<Map<number, number>>;
  /** Counts keys: for each line, how often its key has been counted with it. */
  readonly count: (trx: Database, sightings: readonly Sighting[]) => Promise<Map<number, number>>;
}

/** Starts with nothing seen. `suffix` keeps two files staged within one transaction apart. */
export async function createSeenKeys(trx: Database, suffix: string): Promise<SeenKeys> {
  const claimed = `import_claimed_${suffix.replaceAll('-', '')}`;
  const counted = `import_counted_${suffix.replaceAll('-', '')}`;
  await trx.raw('create temporary table ?? (key text primary key, line integer not null) on commit drop', [
    claimed,
  ]);
  await trx.raw('create temporary table ?? (key text primary key, times integer not null) on commit drop', [
    counted,
  ]);
  return {
    async claim(on, sightings) {
      const json = JSON.stringify(sightings);
      const asked = 'jsonb_to_recordset(?::jsonb) as asked (line integer, key text)';
      await on.raw(
        `insert into ?? (key, line) select lower(key), line from ${asked} order by line on conflict do nothing`,
        [claimed, json],
      );
      const { rows } = await on.raw<{ rows: { line: number; earlier: number }[] }>(
        `select asked.line, claimed.line as earlier from ${asked}
           join ?? as claimed on claimed.key = lower(asked.key) where claimed.line <> asked.line`,
        [json, claimed],
      );
      return new Map(rows.map(({ line, earlier }) => [line, earlier]));
    },
    async count(on, sightings) {
      const lines = new Map<string, number[]>();
      for (const { key, line } of sightings) lines.set(key, [...(lines.get(key) ?? []), line]);
      const { rows } = await on.raw<{ rows: { key: string; times: number }[] }>(
        `insert into ?? as counted (key, times)
         select key, times from jsonb_to_recordset(?::jsonb) as asked (key text, times integer)
         on conflict (key) do update set times = counted.times + excluded.times
         returning key, times`,
        [counted, JSON.stringify([...lines].map(([key, { length }]) => ({ key, times: length })))],
      );
      const result = new Map<number, number>();
      for (const { key, times } of rows) {
        const own = lines.get(key) ?? [];
        own.forEach((line, index) => result.set(line, times - own.length + index + 1));
      }
      return result;
    },
  };
}
