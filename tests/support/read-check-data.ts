import { readFileSync } from 'node:fs';
import type { History } from '~/reliability/history';

/** Rows of a CSV of numbers under tests/reference/data, by column name. */
export function readCheckData(name: string): Record<string, number>[] {
  const text = readFileSync(new URL(`../reference/data/${name}.csv`, import.meta.url), 'utf8');
  const [header = '', ...lines] = text.trim().split('\n');
  const columns = header.split(',');
  return lines.map((line) => {
    const cells = line.split(',').map(Number);
    return Object.fromEntries(columns.map((column, index) => [column, cells[index] ?? NaN]));
  });
}

/** One life a row, from columns with the end of the life and whether it failed. */
export function readLives(name: string, exitColumn: string, failedColumn: string): History[] {
  return readCheckData(name).map((row) => {
    const exit = row[exitColumn] ?? NaN;
    return { entry: row.entry ?? 0, exit, failures: row[failedColumn] === 1 ? [exit] : [] };
  });
}

/** One history of failure times, watched from 0 to `exit`. */
export function readOneHistory(name: string, exit: number): History[] {
  return [{ entry: 0, exit, failures: readCheckData(name).map((row) => row.hours ?? NaN) }];
}

/** Valve seats: one history an engine, replacements as failures, watched from 0 to the engine's last row. */
export function readValveSeats(): History[] {
  const engines = new Map<number, { exit: number; failures: number[] }>();
  for (const { id = NaN, time = NaN, status } of readCheckData('valve-seats')) {
    const engine = engines.get(id) ?? { exit: 0, failures: [] };
    engine.exit = Math.max(engine.exit, time);
    if (status === 1) engine.failures.push(time);
    engines.set(id, engine);
  }
  return [...engines.values()].map(({ exit, failures }) => ({ entry: 0, exit, failures }));
}
