// npm test [-- SUITE [FILTER…]]: brings up what the tests need, runs them, and takes it all down again.
import { realpathSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { PlainError } from '../../db/local/plain-error.mjs';
import { openPrivateServer } from './database.mjs';
import { live } from './life.mjs';
import { assertNodeVersion } from './node-version.mjs';
import { ensurePackages } from './packages.mjs';
import { runPlaywright, runVitest } from './test-suites.mjs';

/**
 * @typedef {import('./life.mjs').Life} Life
 * @typedef {import('./reports.mjs').SuiteResult} SuiteResult
 */

const SUITES = ['unit', 'reference', 'integration', 'e2e'];
const root = `${realpathSync(fileURLToPath(new URL('../..', import.meta.url)))}/`;

/** The last line: until there is a result, that of a run that broke. */
let count = '0 passed, 1 failed';

/** @param {string[]} args @returns {{ suites: string[], filters: string[] }} */
function parseArguments([suite, ...filters]) {
  if (suite === undefined) return { suites: SUITES, filters: [] };
  if (SUITES.includes(suite)) return { suites: [suite], filters };
  throw new PlainError(`There is no suite "${suite}": npm test -- ${SUITES.join('|')} [filter]`);
}

/** A part that lacks what it needs fails, and the others are run. @param {unknown} error @param {Life} life @returns {SuiteResult} */
function cannotRun(error, life) {
  life.signal.throwIfAborted();
  const text =
    error instanceof PlainError ? error.message : error instanceof Error ? error.stack : String(error);
  console.error(`\n${text}`);
  return { passed: 0, failures: [(text ?? '').split('\n')[0] ?? ''] };
}

/** @param {[string, SuiteResult][]} results @returns {number} exit code */
function printResults(results) {
  const failures = results.flatMap(([suite, result]) => result.failures.map((line) => `${suite}: ${line}`));
  const passed = results.reduce((sum, [, result]) => sum + result.passed, 0);
  console.log('');
  for (const [suite, result] of results) {
    console.log(
      `${suite.padEnd(12)} ${result.passed} of ${result.passed + result.failures.length} tests passed`,
    );
  }
  if (failures.length > 0) console.log(`\nFailed:\n${failures.map((line) => `  ${line}`).join('\n')}`);
  count = `${passed} passed, ${failures.length} failed`;
  return failures.length > 0 ? 1 : 0;
}

/** @param {Life} life */
async function test(life) {
  assertNodeVersion();
  const { suites, filters } = parseArguments(process.argv.slice(2));
  await ensurePackages(root, life.signal);
  const run = { root, life, filters };
  /** @type {Map<string, SuiteResult>} */
  const results = new Map();
  const vitestSuites = suites.filter((suite) => suite !== 'e2e');

  let url = process.env.DATABASE_URL;
  if (!url && suites.some((suite) => suite === 'integration' || suite === 'e2e')) {
    try {
      url = (await openPrivateServer(root, life, { name: 'test-postgres', throwaway: true })).url;
    } catch (error) {
      const failed = cannotRun(error, life);
      for (const suite of ['integration', 'e2e']) if (suites.includes(suite)) results.set(suite, failed);
    }
  }
  const runnable = vitestSuites.filter((suite) => !results.has(suite));
  if (runnable.length > 0) {
    for (const [suite, result] of await runVitest(run, runnable, url)) results.set(suite, result);
  }
  if (suites.includes('e2e') && url) {
    results.set('e2e', await runPlaywright(run, url).catch((error) => cannotRun(error, life)));
  }
  const inOrder = suites.flatMap((suite) => {
    const result = results.get(suite);
    return result ? [/** @type {[string, SuiteResult]} */ ([suite, result])] : [];
  });
  return printResults(inOrder);
}

await live(test, { last: () => console.log(`\n${count}`) });
