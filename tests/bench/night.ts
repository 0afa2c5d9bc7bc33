/**
 * What a night costs as the estate grows: time and peak memory of the job in a process of its own, for 100 and
 * 1,000 classes of about 100 failures, beside the time PostgreSQL takes to copy the same rows out. The first night
 * begins without anything kept; the second adds a day. Starting up, measured on an empty estate, is taken off the
 * time and left in the memory.
 *
 * Fails when a class costs over a quarter more in the largest estate than in the smallest, or a night takes 512 MiB.
 *
 *     node --import tsx tests/bench/night.ts [--large] [--classes 300]
 *
 * `--large` goes on to 10,000 classes (a million failures); `--classes` takes one size alone. Needs psql. Works in
 * databases of its own, on the server of DATABASE_URL or on a private one, and drops them.
 */
import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { acquireServer } from '../../db/local-server.mjs';
import { createTestDatabase } from '../support/test-database';
import { addADay, fillEstate, firstNight, rowsOfANight, secondNight } from './estate';

const mostMebibytes = 512;
const mostGrowth = 1.25;
const root = fileURLToPath(new URL('../..', import.meta.url));

interface Measured {
  seconds: number;
  /** Empty where the process does not tell. */
  told: string;
}

/** Runs a program to its end, its output thrown away; what it writes to descriptor 3 is kept. */
function run(command: string, args: string[], url: string): Promise<Measured> {
  return new Promise((resolve, reject) => {
    const start = performance.now();
    const child = spawn(command, args, {
      cwd: root,
      env: { ...process.env, DATABASE_URL: url },
      stdio: ['ignore', 'ignore', 'inherit', 'pipe'],
    });
    let told = '';
    child.stdio[3]?.on('data', (part: Buffer) => (told += part.toString()));
    child.on('error', reject);
    child.on('close', (code) => {
      if (code === 0) resolve({ seconds: (performance.now() - start) / 1000, told });
      else reject(new Error(`${command} ended with code ${code}`));
    });
  });
}

async function night(url: string, asOf: string): Promise<{ seconds: number; mebibytes: number }> {
  const job = ['--import', './tests/bench/report-peak.mjs', '--import', 'tsx', 'jobs/run-job.ts'];
  const { seconds, told } = await run(process.execPath, [...job, 'nightly', '--as-of', asOf], url);
  return { seconds, mebibytes: Number(told) / 1024 };
}

function copyOut(url: string): Promise<Measured> {
  const statements = rowsOfANight.flatMap((rows) => ['-c', `copy (${rows}) to stdout`]);
  return run('psql', ['-X', '-q', '-v', 'ON_ERROR_STOP=1', ...statements, url], url);
}

interface Line {
  classes: number;
  night: string;
  seconds: number;
  mebibytes: number;
  copySeconds: number;
}

async function measureEstate(classes: number): Promise<{ failures: number; lines: Line[] }> {
  const test = await createTestDatabase();
  try {
    await fillEstate(test.database, classes);
    const { rows } = await test.database.raw<{ rows: { count: number }[] }>(`select count(*) from failures`);
    // Once unmeasured, so that all find the rows in memory.
    await copyOut(test.url);
    const copySeconds = (await copyOut(test.url)).seconds;
    const first = await night(test.url, firstNight);
    await addADay(test.database);
    const second = await night(test.url, secondNight);
    const line = (name: string, measured: typeof first): Line => ({
      classes,
      night: name,
      ...measured,
      copySeconds,
    });
    return { failures: rows[0]!.count, lines: [line('first', first), line('second', second)] };
  } finally {
    await test.drop();
  }
}

function printLine(line: Line, failures: number, startSeconds: number): void {
  const { classes, seconds, copySeconds, mebibytes } = line;
  const working = seconds - startSeconds;
  const cells = [
    classes.toLocaleString('en-GB'),
    failures.toLocaleString('en-GB'),
    line.night,
    `${working.toFixed(1)} s`,
    `${((1000 * working) / classes).toFixed(1)} ms`,
    `${copySeconds.toFixed(2)} s`,
    `${(working / copySeconds).toFixed(0)} ×`,
    `${mebibytes.toFixed(0)} MiB`,
  ];
  console.log(`| ${cells.join(' | ')} |`);
}

const { values } = parseArgs({ options: { large: { type: 'boolean' }, classes: { type: 'string' } } });
const sizes = values.classes ? [Number(values.classes)] : values.large ? [100, 1000, 10_000] : [100, 1000];
const server = process.env.DATABASE_URL
  ? undefined
  : await acquireServer({ root, name: 'bench-postgres', throwaway: true });
if (server) process.env.DATABASE_URL = server.url;
try {
  const { lines: empty } = await measureEstate(0);
  const startSeconds = Math.min(...empty.map(({ seconds }) => seconds));
  console.log(`Starting up takes ${startSeconds.toFixed(1)} s and ${empty[0]!.mebibytes.toFixed(0)} MiB.\n`);
  console.log('| classes | failures | night | time | per class | COPY | night to COPY | peak memory |');
  console.log('| ------: | -------: | ----- | ---: | --------: | ---: | ------------: | ----------: |');
  const all: Line[] = [];
  for (const classes of sizes) {
    const { failures, lines } = await measureEstate(classes);
    for (const line of lines) printLine(line, failures, startSeconds);
    all.push(...lines);
  }
  console.log('');
  for (const name of ['first', 'second']) {
    const perClass = all
      .filter((line) => line.night === name)
      .map(({ seconds, classes }) => (seconds - startSeconds) / classes);
    const growth = perClass.at(-1)! / perClass[0]!;
    console.log(`The ${name} night: a class costs ${growth.toFixed(2)} × as much in the largest estate.`);
    if (growth > mostGrowth) {
      console.error(`Its time grows faster than the records.`);
      process.exitCode = 1;
    }
  }
  if (all.some(({ mebibytes }) => !(mebibytes < mostMebibytes))) {
    console.error(`A night takes ${mostMebibytes} MiB or more.`);
    process.exitCode = 1;
  }
} finally {
  await server?.release();
}
