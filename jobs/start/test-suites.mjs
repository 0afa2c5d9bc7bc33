import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { freePort } from '../../db/local/cluster.mjs';
import { PlainError } from '../../db/local/plain-error.mjs';
import { ensureBuild } from './build.mjs';
import { ensureChromium } from './browser.mjs';
import { migrate } from './database.mjs';
import { run, startService } from './processes.mjs';
import { judge, readPlaywrightReport, readVitestReport } from './reports.mjs';
import { SERVE_BUILD, answering } from './web.mjs';

/**
 * @typedef {import('./reports.mjs').SuiteResult} SuiteResult
 * @typedef {object} TestRun
 * @property {string} root the clone, with a slash at its end
 * @property {import('./life.mjs').Life} life
 * @property {string[]} filters
 */

/** A place for a report, with nothing of an earlier run in it. @param {string} root @param {string} name */
function freshReport(root, name) {
  const folder = join(root, 'test-results');
  mkdirSync(folder, { recursive: true });
  const file = join(folder, `${name}.json`);
  rmSync(file, { force: true });
  return file;
}

/** @param {string} file */
const readReport = (file) => (existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : undefined);

/**
 * Runs vitest's projects that are asked for, in one go.
 *
 * @param {TestRun} test
 * @param {string[]} suites
 * @param {string | undefined} databaseUrl
 * @returns {Promise<[string, SuiteResult][]>}
 */
export async function runVitest({ root, life, filters }, suites, databaseUrl) {
  const file = freshReport(root, 'vitest');
  const args = ['node_modules/vitest/vitest.mjs', 'run', ...suites.flatMap((suite) => ['--project', suite])];
  args.push(
    '--allowOnly=false',
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${file}`,
    ...filters,
  );
  const env = { ...process.env, NODE_ENV: 'test', ...(databaseUrl ? { DATABASE_URL: databaseUrl } : {}) };
  const code = await run(process.execPath, args, { cwd: root, env, signal: life.signal });
  const report = readReport(file);
  const results = suites.map((suite) => readVitestReport(report ?? { testResults: [] }, root, suite));
  const unexplained = code !== 0 && results.every(({ failures }) => failures.length === 0);
  return results.map((result, i) => [suites[i] ?? '', judge(result, unexplained)]);
}

/**
 * A database of the browser tests' own on the given server, filled with the demo, dropped at the end.
 *
 * @param {TestRun} test
 * @param {string} serverUrl
 */
async function demoDatabase({ root, life }, serverUrl) {
  const { default: pg } = await import('pg');
  const name = `intervale_e2e_${process.pid}_${Date.now().toString(36)}`;
  /** @param {string} statement */
  const onServer = async (statement) => {
    const client = new pg.Client({ connectionString: serverUrl });
    await client.connect();
    try {
      await client.query(statement);
    } finally {
      await client.end();
    }
  };
  await onServer(`create database ${name}`);
  life.onEnd(() => onServer(`drop database if exists ${name} with (force)`));
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  await migrate(root, url.href, { signal: life.signal, demo: true });
  return url.href;
}

/**
 * Serves the built product on a demo database until the end.
 *
 * @param {TestRun} test
 * @param {string} url
 * @param {number} port
 */
async function serveDemo({ root, life }, url, port) {
  const env = {
    ...process.env,
    DATABASE_URL: url,
    NODE_ENV: 'production',
    INTERVALE_DEMO: '1',
    HOST: '127.0.0.1',
    PORT: String(port),
    APP_ORIGIN: `http://localhost:${port}`,
    SESSION_SECRET: randomBytes(32).toString('hex'),
  };
  const web = startService('web', SERVE_BUILD, { cwd: root, env, hurry: life.hurry, quiet: true });
  life.onEnd(() => web.stop());
  const ended = web.ended.then((how) => {
    throw new PlainError(`The web server ${how} before it answered.`);
  });
  await Promise.race([answering(env.HOST, port, life.signal), ended]);
  // From here on its end shows in the tests.
  ended.catch(() => {});
}

/**
 * Runs the browser tests against the built product.
 *
 * @param {TestRun} test
 * @param {string} serverUrl
 * @returns {Promise<SuiteResult>}
 */
export async function runPlaywright(test, serverUrl) {
  const { root, life, filters } = test;
  await ensureChromium(life.signal);
  await ensureBuild(root, life.signal);
  const file = freshReport(root, 'e2e');
  const port = await freePort();
  const url = await demoDatabase(test, serverUrl);
  await serveDemo(test, url, port);
  const env = { ...process.env, DATABASE_URL: url, E2E_ORIGIN: `http://localhost:${port}`, E2E_REPORT: file };
  const args = ['node_modules/@playwright/test/cli.js', 'test', ...filters];
  const code = await run(process.execPath, args, { cwd: root, env, signal: life.signal });
  return judge(readPlaywrightReport(readReport(file) ?? {}), code !== 0);
}
