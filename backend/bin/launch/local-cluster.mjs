/** The cluster of this clone: where it lies, and its start. */
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { openCluster, stopLeftover } from './cluster.mjs';
import { CLONE, cloneKey, IS_ROOT, LOCAL, LOGS, readState, rememberState, SYSTEM_HOME } from './paths.mjs';
import { ensureDatabase, ensureRoles } from './roles.mjs';
import { say } from './say.mjs';
import { DATABASE, databaseAddresses } from './settle.mjs';

/** Of an ordinary user: inside the clone. Of root: in the system's folder, since `postgres` must enter it. */
export function clusterHome() {
  return IS_ROOT ? join(SYSTEM_HOME, cloneKey()) : join(LOCAL, 'cluster');
}

const originFile = (home) => `${home}.origin.json`;

/**
 * A cluster under SYSTEM_HOME outlives its clone. A new clone at the same path has other passwords and
 * starts afresh; the old one's data is set aside, not touched.
 */
async function setAsideForeign(home, instance) {
  if (!existsSync(home)) return;
  const origin = existsSync(originFile(home)) ? JSON.parse(readFileSync(originFile(home), 'utf8')) : {};
  if (origin.instance === instance) return;
  await stopLeftover(home);
  const aside = `${home}.before-${new Date().toISOString().slice(0, 19).replace(/\D/g, '')}`;
  renameSync(home, aside);
  say(`An earlier clone at this path left a database; it is kept in ${aside}, and this clone starts with a new one.`);
}

async function claim(home, secrets) {
  if (!IS_ROOT) return;
  mkdirSync(SYSTEM_HOME, { recursive: true, mode: 0o755 });
  await setAsideForeign(home, secrets.instance);
  writeFileSync(originFile(home), JSON.stringify({ clone: CLONE, instance: secrets.instance }), { mode: 0o600 });
}

/** Starts this clone's cluster with its roles and database; resolves with its part and addresses. */
export async function openLocalCluster({ secrets, guard, track }) {
  const home = clusterHome();
  await claim(home, secrets);
  const fresh = !existsSync(join(home, 'data'));
  if (fresh) say('Making a database cluster of its own');
  const options = { home, password: secrets.admin, port: readState().databasePort, logFile: join(LOGS, 'database.log'), guard, track };
  const cluster = await openCluster(options);
  rememberState({ databasePort: cluster.port });
  await ensureRoles(cluster, secrets);
  await ensureDatabase(cluster, secrets, DATABASE);
  return { part: cluster.part, addresses: databaseAddresses(cluster, secrets) };
}
