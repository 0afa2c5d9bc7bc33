/**
 * @typedef {{ passed: number, failures: string[] }} SuiteResult `failures`: one line for each thing that failed
 *
 * @typedef {{ status: string, fullName: string }} VitestAssertion
 * @typedef {{ name: string, status: string, message?: string, assertionResults: VitestAssertion[] }} VitestFile
 * @typedef {{ testResults: VitestFile[] }} VitestReport what vitest's JSON reporter writes
 *
 * @typedef {{ title: string, ok: boolean, tests: { status: string }[] }} PlaywrightSpec
 * @typedef {{ title: string, specs?: PlaywrightSpec[], suites?: PlaywrightSuite[] }} PlaywrightSuite
 * @typedef {{ suites?: PlaywrightSuite[], errors?: { message?: string }[] }} PlaywrightReport what Playwright's writes
 */

/**
 * Counts the tests of one vitest project, by the folder its files lie in. A file that could not be loaded is
 * a failure.
 *
 * @param {VitestReport} report
 * @param {string} root the clone, with a slash at its end
 * @param {string} suite
 * @returns {SuiteResult}
 */
export function readVitestReport(report, root, suite) {
  /** @type {SuiteResult} */
  const result = { passed: 0, failures: [] };
  for (const file of report.testResults) {
    const path = file.name.startsWith(root) ? file.name.slice(root.length) : file.name;
    if (!path.startsWith(`tests/${suite}/`)) continue;
    const failed = file.assertionResults.filter(({ status }) => status === 'failed');
    result.passed += file.assertionResults.filter(({ status }) => status === 'passed').length;
    result.failures.push(...failed.map(({ fullName }) => `${path} › ${fullName}`));
    if (file.status === 'failed' && failed.length === 0) {
      result.failures.push(`${path}: ${(file.message ?? 'could not be run').split('\n')[0]}`);
    }
  }
  return result;
}

/** @param {PlaywrightSuite} suite @param {string} path @returns {{ name: string, status: string }[]} */
function testsOf(suite, path) {
  const name = path ? `${path} › ${suite.title}` : suite.title;
  const own = (suite.specs ?? []).flatMap((spec) =>
    spec.tests.map(({ status }) => ({ name: `${name} › ${spec.title}`, status })),
  );
  return [...own, ...(suite.suites ?? []).flatMap((inner) => testsOf(inner, name))];
}

/**
 * Counts the browser tests. One that passed only on a second try is a failure.
 *
 * @param {PlaywrightReport} report
 * @returns {SuiteResult}
 */
export function readPlaywrightReport(report) {
  const tests = (report.suites ?? []).flatMap((suite) => testsOf(suite, ''));
  return {
    passed: tests.filter(({ status }) => status === 'expected').length,
    failures: [
      ...tests.filter(({ status }) => status === 'unexpected' || status === 'flaky').map(({ name }) => name),
      ...(report.errors ?? []).map(
        ({ message }) => (message ?? 'an error outside any test').split('\n')[0] ?? '',
      ),
    ],
  };
}

/**
 * A suite's result with what its runner's end adds: no test run, or a runner that failed without saying
 * which test, count as a failure each.
 *
 * @param {SuiteResult} result
 * @param {boolean} runnerFailed whether it ended with an exit code other than 0 and no other suite explains it
 * @returns {SuiteResult}
 */
export function judge(result, runnerFailed) {
  if (result.failures.length > 0) return result;
  if (runnerFailed) return { ...result, failures: ['the test runner failed outside any test'] };
  return result.passed > 0 ? result : { ...result, failures: ['no test was run'] };
}
