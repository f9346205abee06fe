import { describe, expect, it } from 'vitest';
import { countVitestResults } from './test-tally.ts';

const file = (status: string, tests: [name: string, status: string][]) => ({
  name: '/checkout/a.test.ts',
  status,
  assertionResults: tests.map(([fullName, testStatus]) => ({ fullName, status: testStatus })),
});
const report = (success: boolean, ...testResults: unknown[]) => JSON.stringify({ success, testResults });

describe('The tally of a test run', () => {
  it('counts tests, and names those that did not run', () => {
    const tests: [string, string][] = [
      ['adds', 'passed'],
      ['subtracts', 'failed'],
      ['divides', 'pending'],
      ['squares', 'todo'],
    ];
    expect(countVitestResults(report(false, file('failed', tests)), 1)).toEqual({
      passed: 1,
      failed: 1,
      skipped: ['/checkout/a.test.ts: divides', '/checkout/a.test.ts: squares'],
    });
  });

  it('counts a file that could not be loaded as a failure', () => {
    const broken = report(false, file('failed', []), file('passed', [['adds', 'passed']]));
    expect(countVitestResults(broken, 1)).toEqual({ passed: 1, failed: 1, skipped: [] });
  });

  it('counts an error outside of the tests as a failure, though each test passed', () => {
    const allPassed = file('passed', [['adds', 'passed']]);
    expect(countVitestResults(report(false, allPassed), 1)).toMatchObject({ passed: 1, failed: 1 });
    expect(countVitestResults(report(true, allPassed), 1)).toMatchObject({ passed: 1, failed: 1 });
    expect(countVitestResults(report(true, allPassed), null)).toMatchObject({ passed: 1, failed: 1 });
    expect(countVitestResults(report(true, allPassed), 0)).toMatchObject({ passed: 1, failed: 0 });
  });

  it('counts a runner that left no readable report as a failure', () => {
    expect(countVitestResults(null, 0)).toEqual({ passed: 0, failed: 1, skipped: [] });
    expect(countVitestResults('{"succ', 0)).toEqual({ passed: 0, failed: 1, skipped: [] });
    expect(countVitestResults('{}', 0)).toEqual({ passed: 0, failed: 1, skipped: [] });
  });
});
