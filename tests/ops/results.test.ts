import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

interface Counts { passed: number; failed: number; failures: string[] }
let folder: string;
let countReport: (file: string, options: { whole: boolean }) => Counts;
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'crosstie-results-'));
  ({ countReport } = await import(new URL('../support/results.mjs', import.meta.url).href));
});
afterAll(() => rmSync(folder, { recursive: true }));

function count(changes: object, whole = true): Counts {
  const file = join(folder, 'report.json');
  const report = { success: true, numPassedTests: 3, numPendingTests: 0, numTodoTests: 0, testResults: [], ...changes };
  writeFileSync(file, JSON.stringify(report));
  return countReport(file, { whole });
}

describe('the count of a test run', () => {
  it('is all passed where all passed', () => {
    expect(count({})).toEqual({ passed: 3, failed: 0, failures: [] });
  });
  it('counts each failed test, by name', () => {
    const suite = { name: 'a.test.ts', status: 'failed', assertionResults: [{ status: 'failed', fullName: 'adds' }, { status: 'passed', fullName: 'other' }] };
    expect(count({ success: false, testResults: [suite] })).toMatchObject({ failed: 1, failures: ['a.test.ts: adds'] });
  });
  it('counts a file that failed before its first test', () => {
    expect(count({ success: false, testResults: [{ name: 'a.test.ts', status: 'failed', message: 'cannot import', assertionResults: [] }] })).toMatchObject({ failed: 1 });
  });
  it('counts an error outside the tests', () => {
    expect(count({ success: false })).toMatchObject({ failed: 1 });
  });
  it('lets no test of a whole run be skipped', () => {
    expect(count({ numPendingTests: 2 })).toMatchObject({ failed: 1 });
    expect(count({ numPendingTests: 2 }, false)).toMatchObject({ failed: 0 });
  });
  it('counts a runner that died', () => {
    expect(countReport(join(folder, 'never-written.json'), { whole: true })).toMatchObject({ passed: 0, failed: 1 });
  });
});
