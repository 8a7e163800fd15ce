/** Counts of one test run, from vitest's JSON report and from the steps that are not vitest's. */
import { existsSync, readFileSync } from 'node:fs';

/**
 * Counts of one report. A file that failed before its first test counts as one failure; a report that
 * was never written counts as one too, since the runner died. In a `whole` run no test may be skipped.
 */
export function countReport(file, { whole }) {
  if (!existsSync(file)) return { passed: 0, failed: 1, failures: ['the test runner ended without a report'] };
  const report = JSON.parse(readFileSync(file, 'utf8'));
  const failures = [];
  for (const suite of report.testResults) {
    const failed = suite.assertionResults.filter((test) => test.status === 'failed');
    failures.push(...failed.map((test) => `${suite.name}: ${test.fullName}`));
    if (suite.status === 'failed' && failed.length === 0) failures.push(`${suite.name}: ${suite.message?.split('\n')[0] ?? 'failed'}`);
  }
  const unfinished = report.numPendingTests + report.numTodoTests;
  if (whole && unfinished > 0) failures.push(`${unfinished} tests were skipped: no test may be`);
  if (failures.length === 0 && !report.success) failures.push('the run reports a failure outside its tests');
  return { passed: report.numPassedTests, failed: failures.length, failures };
}

export function addCounts(all) {
  return {
    passed: all.reduce((sum, one) => sum + one.passed, 0),
    failed: all.reduce((sum, one) => sum + one.failed, 0),
    failures: all.flatMap((one) => one.failures),
  };
}
