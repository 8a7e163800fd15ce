/** A throwaway cluster for one test run, and the template database that every test file clones. */
import { mkdirSync, mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ADMIN, openCluster, stopLeftover } from '../../backend/bin/launch/cluster.mjs';
import { isAlive } from '../../backend/bin/launch/lock.mjs';
import { CLONE, IS_ROOT, SYSTEM_HOME, newSecret } from '../../backend/bin/launch/paths.mjs';
import { ROLE_NAMES, ensureDatabase, ensureRoles } from '../../backend/bin/launch/roles.mjs';
import { mustRun } from '../../backend/bin/launch/run-command.mjs';

export const TEMPLATE = 'crosstie_template';
const PREFIX = 'crosstie-test-';

/** Nothing here outlives the run, so nothing waits for the disk. */
const settings = { fsync: 'off', full_page_writes: 'off', synchronous_commit: 'off', max_connections: 200 };

function parentFolder() {
  if (!IS_ROOT) return tmpdir();
  mkdirSync(SYSTEM_HOME, { recursive: true, mode: 0o755 });
  return SYSTEM_HOME;
}

/** Folders are named after the process that made them; those of killed runs are cleared. */
async function clearLeftovers(parent) {
  for (const name of readdirSync(parent).filter((entry) => entry.startsWith(PREFIX))) {
    const pid = Number(name.slice(PREFIX.length).split('-')[0]);
    if (isAlive(pid)) continue;
    const home = join(parent, name);
    try {
      await stopLeftover(home);
      rmSync(home, { recursive: true, force: true });
    } catch (error) {
      if (error.code !== 'EACCES' && error.code !== 'EPERM') throw error;
    }
  }
}

function environment(cluster, passwords) {
  const url = (role) => cluster.url(`crosstie_${role}`, passwords[role], '');
  const entries = ROLE_NAMES.map((role) => [`CROSSTIE_TEST_${role.toUpperCase()}_URL`, url(role)]);
  return { CROSSTIE_TEST_ADMIN_URL: cluster.url(ADMIN, passwords.admin, ''), ...Object.fromEntries(entries) };
}

/** Opens the cluster; resolves with its part and the environment that tests/support/database.ts reads. */
export async function openTestCluster({ guard, track, logFile }) {
  const parent = parentFolder();
  await clearLeftovers(parent);
  const home = mkdtempSync(join(parent, `${PREFIX}${process.pid}-`));
  guard.remove(home);
  const passwords = Object.fromEntries(['admin', ...ROLE_NAMES].map((name) => [name, newSecret()]));
  const cluster = await openCluster({ home, password: passwords.admin, settings, logFile, guard, track });
  await ensureRoles(cluster, passwords);
  await ensureDatabase(cluster, passwords, TEMPLATE);
  const ownerUrl = cluster.url('crosstie_owner', passwords.owner, TEMPLATE);
  await migrateTemplate(ownerUrl, track);
  return { part: cluster.part, env: environment(cluster, passwords) };
}

async function migrateTemplate(ownerUrl, track) {
  const script = "import { migrate } from '#backend/db/migrate'; await migrate(process.env.OWNER_URL);";
  const args = ['--conditions', 'source', '--import', 'tsx', '--input-type=module', '-e', script];
  const env = { ...process.env, OWNER_URL: ownerUrl };
  await mustRun(process.execPath, args, { cwd: CLONE, env, track, purpose: 'Migrating the template database' });
}
