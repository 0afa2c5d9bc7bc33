import { describe, expect, it } from 'vitest';
import { judge, readPlaywrightReport, readVitestReport } from '../../../jobs/start/reports.mjs';

describe('readVitestReport', () => {
  const report = {
    testResults: [
      {
        name: '/clone/tests/unit/a.test.ts',
        status: 'failed',
        assertionResults: [
          { status: 'passed', fullName: 'a adds' },
          { status: 'failed', fullName: 'a subtracts' },
        ],
      },
      {
        name: '/clone/tests/unit/b.test.ts',
        status: 'failed',
        message: 'No such file\nat …',
        assertionResults: [],
      },
      {
        name: '/clone/tests/reference/c.test.ts',
        status: 'passed',
        assertionResults: [{ status: 'passed', fullName: 'c' }],
      },
    ],
  };

  it('counts one suite, and a file that cannot be loaded as a failure', () => {
    expect(readVitestReport(report, '/clone/', 'unit')).toEqual({
      passed: 1,
      failures: ['tests/unit/a.test.ts › a subtracts', 'tests/unit/b.test.ts: No such file'],
    });
    expect(readVitestReport(report, '/clone/', 'reference')).toEqual({ passed: 1, failures: [] });
    expect(readVitestReport(report, '/clone/', 'integration')).toEqual({ passed: 0, failures: [] });
  });
});

describe('readPlaywrightReport', () => {
  it('counts tests of nested suites, a second-try pass as a failure, and errors outside tests', () => {
    const spec = (title: string, status: string) => ({
      title,
      ok: status === 'expected',
      tests: [{ status }],
    });
    const report = {
      suites: [
        {
          title: 'a.test.ts',
          specs: [spec('opens', 'expected')],
          suites: [{ title: 'form', specs: [spec('saves', 'unexpected'), spec('undoes', 'flaky')] }],
        },
      ],
      errors: [{ message: 'Cannot read config\nmore' }],
    };
    expect(readPlaywrightReport(report)).toEqual({
      passed: 1,
      failures: ['a.test.ts › form › saves', 'a.test.ts › form › undoes', 'Cannot read config'],
    });
  });

  it('finds nothing in an empty report', () => {
    expect(readPlaywrightReport({})).toEqual({ passed: 0, failures: [] });
  });
});

describe('judge', () => {
  it('leaves a suite with tests alone', () => {
    expect(judge({ passed: 3, failures: [] }, false)).toEqual({ passed: 3, failures: [] });
    expect(judge({ passed: 3, failures: ['x'] }, true)).toEqual({ passed: 3, failures: ['x'] });
  });

  it('fails a suite that ran nothing, and one whose runner failed without a failed test', () => {
    expect(judge({ passed: 0, failures: [] }, false).failures).toEqual(['no test was run']);
    expect(judge({ passed: 3, failures: [] }, true).failures).toEqual([
      'the test runner failed outside any test',
    ]);
  });
});
