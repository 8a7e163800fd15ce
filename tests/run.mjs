/**
 * npm test: lint, type check, then the unit, API and browser tests, on a cluster and ports of their own.
 * `npm test -- FILE…` runs only those files (through vitest), on such a cluster.
 */
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureBuilt } from '../backend/bin/launch/build.mjs';
import { ensureDebianPackages } from '../backend/bin/launch/debian.mjs';
import { ensurePackages } from '../backend/bin/launch/packages.mjs';
import { CLONE, makeLocalFolders } from '../backend/bin/launch/paths.mjs';
import { startGuard } from '../backend/bin/launch/processes.mjs';
import { runCommand } from '../backend/bin/launch/run-command.mjs';
import { complain, PlainError, say } from '../backend/bin/launch/say.mjs';
import { addCounts, countReport } from './support/results.mjs';
import { openTestCluster } from './support/test-cluster.mjs';

const filters = process.argv.slice(2);
const program = (path) => join(CLONE, 'node_modules', path);
const running = new Set();
let stopped;

function track(child) {
  running.add(child);
  child.once('exit', () => running.delete(child));
  if (stopped) child.kill('SIGTERM');
}

/** A step that is no test of its own still counts: one passed or one failed. */
async function step(name, command, args) {
  say(`\n${name}`);
  const { code } = await runCommand(command, args, { cwd: CLONE, show: true, track });
  return code === 0 ? { passed: 1, failed: 0, failures: [] } : { passed: 0, failed: 1, failures: [`${name} failed`] };
}

async function vitest(name, args, { env, scratch }) {
  say(`\n${name}`);
  const report = join(scratch, `${name.replace(/\W/g, '-')}.json`);
  const all = ['run', '--config', 'tests/vitest.config.ts', '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...args];
  await runCommand(process.execPath, [program('vitest/vitest.mjs'), ...all], { cwd: CLONE, env, show: true, track });
  return countReport(report, { whole: filters.length === 0 });
}

async function everything(context) {
  const browserTests = existsSync(join(CLONE, 'tests/browser'));
  const counts = [
    await step('Lint', process.execPath, [program('oxlint/bin/oxlint'), '--deny-warnings']),
    await step('Type check', process.execPath, [program('typescript/bin/tsc'), '-b']),
    await vitest('Unit and API tests', ['--exclude', 'tests/browser/**'], context),
  ];
  if (browserTests && !stopped) {
    await ensureBuilt(['backend', 'frontend'], { track });
    counts.push(await vitest('Browser tests', ['tests/browser'], context));
  }
  return addCounts(counts);
}

async function run({ guard, scratch }) {
  makeLocalFolders();
  await ensurePackages({ track });
  await ensureDebianPackages(['postgresql', 'chromium', 'numpy'], { track });
  const cluster = await openTestCluster({ guard, track, logFile: join(scratch, 'database.log') });
  try {
    const context = { env: { ...process.env, ...cluster.env, NODE_ENV: 'test' }, scratch };
    if (filters.length === 0) return await everything(context);
    if (filters.some((filter) => filter.includes('browser'))) await ensureBuilt(['backend', 'frontend'], { track });
    return await vitest('Tests', filters, context);
  } finally {
    await cluster.part.stop();
  }
}

function stopOn(signal) {
  process.on(signal, () => {
    stopped = signal;
    for (const child of running) child.kill('SIGTERM');
  });
}

function summarise({ passed, failed, failures }) {
  const line = `${passed} passed, ${failed} failed`;
  if (process.env.CROSSTIE_TEST_SUMMARY) writeFileSync(process.env.CROSSTIE_TEST_SUMMARY, line);
  for (const failure of failures) complain(`  failed: ${failure}`);
  say(`\n${line}`);
  process.exitCode = failed > 0 || passed === 0 ? 1 : 0;
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) stopOn(signal);
const guard = startGuard();
const scratch = mkdtempSync(join(tmpdir(), 'crosstie-run-'));
guard.remove(scratch);
try {
  const counts = await run({ guard, scratch });
  summarise(stopped ? { ...counts, failed: counts.failed + 1, failures: [...counts.failures, `stopped by ${stopped}`] } : counts);
} catch (error) {
  complain(error instanceof PlainError ? error.message : String(error?.stack ?? error));
  summarise({ passed: 0, failed: 1, failures: [stopped ? `stopped by ${stopped}` : 'the run could not start'] });
} finally {
  rmSync(scratch, { recursive: true, force: true });
  await guard.close();
}
