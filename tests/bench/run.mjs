/**
 * npm run bench: every *.bench.ts in this folder, on a cluster of its own, as ratios to plain
 * implementations measured in the same run. `-- --json`: one JSON object of name to median ratio.
 * `-- WORD`: only the benches whose names hold the word.
 */
import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureDebianPackages } from '../../backend/bin/launch/debian.mjs';
import { ensurePackages } from '../../backend/bin/launch/packages.mjs';
import { CLONE, makeLocalFolders } from '../../backend/bin/launch/paths.mjs';
import { startGuard } from '../../backend/bin/launch/processes.mjs';
import { runCommand } from '../../backend/bin/launch/run-command.mjs';
import { complain } from '../../backend/bin/launch/say.mjs';
import { openTestCluster } from '../support/test-cluster.mjs';

const words = process.argv.slice(2).filter((argument) => !argument.startsWith('--'));
const folder = join(CLONE, 'tests/bench');
const benches = readdirSync(folder).filter((name) => name.endsWith('.bench.ts') && (words.length === 0 || words.some((word) => name.includes(word)))).toSorted();
const running = new Set();

function track(child) {
  running.add(child);
  child.once('exit', () => running.delete(child));
}
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
  process.on(signal, () => {
    for (const child of running) child.kill('SIGTERM');
  });
}

const guard = startGuard();
const scratch = mkdtempSync(join(tmpdir(), 'crosstie-bench-run-'));
guard.remove(scratch);
let cluster;
try {
  makeLocalFolders();
  await ensurePackages({ track });
  await ensureDebianPackages(['postgresql', 'numpy'], { track });
  cluster = await openTestCluster({ guard, track, logFile: join(scratch, 'database.log') });
  const args = ['--conditions', 'source', '--import', 'tsx', join(folder, 'measure.ts'), ...benches.map((name) => join(folder, name)), ...(process.argv.includes('--json') ? ['--json'] : [])];
  const { code } = await runCommand(process.execPath, args, { cwd: CLONE, env: { ...process.env, ...cluster.env }, show: true, track });
  process.exitCode = code === 0 ? 0 : 1;
} catch (error) {
  complain(String(error?.stack ?? error));
  process.exitCode = 1;
} finally {
  await cluster?.part.stop();
  rmSync(scratch, { recursive: true, force: true });
  await guard.close();
}
