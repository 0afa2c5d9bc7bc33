/**
 * How much memory an import takes: stages and applies histories of 20,000 and of 200,000 rows and prints by how
 * much the process grew at its largest. Fails when ten times the rows take more than twice the memory, or 200,000
 * rows more than 150 MiB.
 *
 * `DATABASE_URL=postgres://… npx tsx tests/bench/import-memory.ts`: any PostgreSQL server; it works in a database
 * of its own and drops it.
 */
import { applyImport, stageImport } from '~/models/imports.server';
import { addPerson } from '../support/people';
import { importDay, importFile } from '../support/stage-file';
import { createTestDatabase } from '../support/test-database';

const assetCount = 500;
const sizes = [20_000, 200_000];
const mebibyte = 1024 * 1024;
const mostMebibytes = 150;

const tagOf = (index: number) => `PMP-${String(index).padStart(4, '0')}`;

function registerFile(): string {
  const rows = Array.from(
    { length: assetCount },
    (_, index) => `Tarn House,Pump,days,${tagOf(index)},2000-01-01\n`,
  );
  return `site,class,clock,tag,in service\n${rows.join('')}`;
}

async function* historyFile(rows: number): AsyncGenerator<Buffer> {
  yield Buffer.from('tag,date,event,result,failure mode,note,record\n');
  for (let index = 0; index < rows; index += 1) {
    const day = new Date(Date.UTC(2001, 0, 1 + (index % 9000))).toISOString().slice(0, 10);
    const tag = tagOf(index % assetCount);
    yield Buffer.from(
      `${tag},${day},failure,renewed,Leaking,"Seal, shaft side, run ${index}",${rows}-${index}\n`,
    );
  }
}

/** Runs a task and tells by how many MiB the process grew while it ran, at most, and how long it took. */
async function measure(task: () => Promise<unknown>): Promise<{ grown: number; seconds: number }> {
  global.gc?.();
  const before = process.memoryUsage().rss;
  let most = before;
  const timer = setInterval(() => (most = Math.max(most, process.memoryUsage().rss)), 20);
  const start = performance.now();
  await task();
  clearInterval(timer);
  return { grown: (most - before) / mebibyte, seconds: (performance.now() - start) / 1000 };
}

const test = await createTestDatabase();
try {
  const db = test.database;
  const personId = await addPerson(db, { email: 'admin@larkmoor.example', roles: ['admin'] });
  await importFile(db, 'register', registerFile(), { personId });
  const peaks: number[] = [];
  for (const rows of sizes) {
    let importId = '';
    const staged = await measure(async () => {
      const stream = historyFile(rows);
      importId = await stageImport(db, {
        kind: 'history',
        fileName: 'bench.csv',
        stream,
        personId,
        today: importDay,
      });
    });
    const applied = await measure(() =>
      applyImport(db, { importId, personId, mode: 'all-or-nothing', today: importDay }),
    );
    for (const [what, { grown, seconds }] of Object.entries({ staged, applied })) {
      console.log(`${rows} rows ${what}: +${grown.toFixed(0)} MiB at most, ${seconds.toFixed(1)} s`);
    }
    peaks.push(Math.max(staged.grown, applied.grown));
  }
  const [few = 0, many = 0] = peaks;
  if (many > mostMebibytes || many > Math.max(2 * few, 60)) {
    console.error('The memory of an import grows with its rows.');
    process.exitCode = 1;
  }
} finally {
  await test.drop();
}
