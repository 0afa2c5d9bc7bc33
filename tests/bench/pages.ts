/**
 * How long the pages take with 2,000 classes and 300,000 failures loaded and assessed, beside an empty page of the
 * same server in the same run, requests of all pages taken in turn; then the plans of the queries behind them.
 *
 * Fails when the list of classes or a class page takes 3 times the time of the empty page or more, or when a plan
 * reads a whole large table to give a page's few rows.
 *
 *     node --import tsx tests/bench/pages.ts [--classes 2000] [--rounds 40]
 *
 * Needs the product built (`npm run build`). Works on a private server, whose log tells the plans.
 */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { startSession } from '~/services/session.server';
import { acquireServer } from '../../db/local-server.mjs';
import { freePort } from '../../db/local/cluster.mjs';
import { SERVE_BUILD, answering } from '../../jobs/start/web.mjs';
import { readOrganisation } from '~/models/organisation.server';
import type { Database } from '../../db/connection';
import { runNightly } from '../../jobs/nightly';
import { addPerson } from '../support/people';
import { createTestDatabase, type TestDatabase } from '../support/test-database';
import { fillEstate, firstNight } from './estate';
import { explainEverything, plansIn } from './plans';

const mostTimes = 3;
const root = fileURLToPath(new URL('../..', import.meta.url));
const { values } = parseArgs({
  options: { classes: { type: 'string', default: '2000' }, rounds: { type: 'string', default: '40' } },
});
process.env.INTERVALE_TEST = '1';
process.env.SESSION_SECRET = 'a secret of this measurement alone, 40 long';

interface Page {
  name: string;
  path: string;
  /** Whether the limit holds for it. */
  limited: boolean;
}

async function pagesOf(db: Database): Promise<Page[]> {
  const { id } = (await db('asset_classes').where('name', 'Class 7').first('id')) as { id: string };
  return [
    { name: 'empty page', path: '/log', limited: false },
    { name: 'classes', path: '/classes', limited: true },
    { name: 'classes, sorted by slope, page 20', path: '/classes?sort=slope&page=20', limited: true },
    { name: 'a class', path: `/classes/${id}`, limited: true },
    { name: 'records of a class', path: `/classes/${id}/records`, limited: false },
    { name: 'since you last looked', path: '/since', limited: false },
    { name: 'changes', path: '/changes', limited: false },
    { name: 'the year ahead', path: '/year-ahead', limited: false },
    { name: 'search', path: '/search?q=1999-1', limited: false },
  ];
}

async function timeOf(origin: string, path: string, cookie: string): Promise<number> {
  const start = performance.now();
  const response = await fetch(origin + path, { headers: { Cookie: cookie }, redirect: 'manual' });
  await response.arrayBuffer();
  if (response.status !== 200) throw new Error(`${path} answers ${response.status}`);
  return performance.now() - start;
}

const median = (times: number[]) => times.sort((a, b) => a - b)[Math.floor(times.length / 2)]!;

async function measure(origin: string, cookie: string, pages: readonly Page[]): Promise<Map<Page, number>> {
  const times = new Map(pages.map((page) => [page, [] as number[]]));
  const warmUp = 3;
  for (let round = -warmUp; round < Number(values.rounds); round += 1) {
    for (const page of pages) {
      const time = await timeOf(origin, page.path, cookie);
      if (round >= 0) times.get(page)!.push(time);
    }
  }
  return new Map([...times].map(([page, all]) => [page, median(all)]));
}

function report(times: Map<Page, number>): void {
  const [empty] = [...times.values()];
  console.log('| page | median | beside the empty page |');
  console.log('| ---- | -----: | --------------------: |');
  for (const [{ name, limited }, time] of times) {
    const beside = time / empty!;
    console.log(`| ${name} | ${time.toFixed(1)} ms | ${beside.toFixed(2)} × |`);
    if (limited && beside >= mostTimes) {
      console.error(`${name} takes ${mostTimes} times the empty page or more.`);
      process.exitCode = 1;
    }
  }
}

/** Runs the built product on a database for as long as it is asked something. */
async function withWebServer(url: string, ask: (origin: string) => Promise<void>): Promise<void> {
  const port = await freePort();
  const env = {
    ...process.env,
    DATABASE_URL: url,
    PORT: String(port),
    HOST: '127.0.0.1',
    NODE_ENV: 'production',
  };
  const web = spawn(process.execPath, SERVE_BUILD, {
    cwd: root,
    env,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  try {
    await answering('127.0.0.1', port, AbortSignal.timeout(30_000));
    await ask(`http://127.0.0.1:${port}`);
  } finally {
    web.kill('SIGTERM');
    await once(web, 'exit');
  }
}

/** Prints each query's plan once, the slowest first, and names the large tables that one reads whole. */
function reportPlans(log: string): void {
  const plans = plansIn(log);
  console.log(`\n${plans.length} queries, the slowest first.`);
  for (const { query, plan, milliseconds, readWhole } of plans) {
    console.log(`\n${milliseconds.toFixed(1)} ms: ${query}\n${plan}`);
    if (readWhole.length === 0) continue;
    console.error(`This reads the whole of ${readWhole.join(', ')}.`);
    process.exitCode = 1;
  }
}

/** Two months of earlier nights, without their details: a page must find the one in force among them. */
async function addEarlierNights(db: Database): Promise<void> {
  await db.raw(
    `with runs as (
       insert into job_runs (job, as_of, state, finished_at)
       select 'nightly', '${firstNight}'::date - n, 'finished', now() from generate_series(1, 60) n returning id, as_of)
     insert into assessments (run_id, class_id, as_of, verdict, trend, failures, caution_codes, summary, detail)
     select r.id, a.class_id, r.as_of, a.verdict, a.trend, a.failures, a.caution_codes, '{}', '{}'
       from runs r, assessments a`,
  );
}

async function measurePages({ database: db, url }: TestDatabase, logFile: string): Promise<void> {
  await fillEstate(db, Number(values.classes), 45);
  const personId = await addPerson(db, { email: 'lead@bench.example', roles: ['lead'] });
  await runNightly(db, { asOf: firstNight, organisation: await readOrganisation(db) });
  await addEarlierNights(db);
  await db.raw('analyze');
  const counted = await db.raw<{ rows: { count: number }[] }>('select count(*) from failures');
  console.log(`${values.classes} classes, ${counted.rows[0]!.count} failures.\n`);

  const pages = await pagesOf(db);
  const cookie = (await startSession(db, new Request('http://127.0.0.1'), personId)).split(';')[0]!;
  await withWebServer(url, async (origin) => report(await measure(origin, cookie, pages)));
  await explainEverything(db);
  const before = readFileSync(logFile).length;
  await withWebServer(url, async (origin) => {
    for (const { path } of pages) await timeOf(origin, path, cookie);
  });
  reportPlans(readFileSync(logFile).subarray(before).toString());
}

const server = await acquireServer({ root, name: 'bench-postgres', throwaway: true });
process.env.DATABASE_URL = server.url;
const test = await createTestDatabase();
try {
  await measurePages(test, server.logFile);
} finally {
  await test.drop();
  await server.release();
}
