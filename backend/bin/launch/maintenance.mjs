/**
 * Runs one maintenance command against this installation's database, started for it where need be.
 * Paths that a person gives are meant from where the person stands, not from this clone.
 */
import { resolve } from 'node:path';
import { ensureBuilt } from './build.mjs';
import { clusterUrl } from './cluster.mjs';
import { ensureDebianPackages } from './debian.mjs';
import { openLocalCluster } from './local-cluster.mjs';
import { runningPid } from './only-one.mjs';
import { ensurePackages } from './packages.mjs';
import { CLONE, makeLocalFolders, readState } from './paths.mjs';
import { startGuard } from './processes.mjs';
import { runCommand } from './run-command.mjs';
import { fail } from './say.mjs';
import { databaseAddresses, settle, withDatabase } from './settle.mjs';

/** Of the running instance, or of the cluster that is started for this command alone. */
async function localDatabase(secrets, guard) {
  if (!runningPid()) return openLocalCluster({ secrets, guard });
  return { part: undefined, addresses: databaseAddresses({ url: clusterUrl(readState().databasePort) }, secrets) };
}

/** Where a local instance was last reached, unless the environment says otherwise. */
function ofLastStart(local) {
  const { issuer, publicUrl } = readState();
  if (process.env.PORT || process.env.PUBLIC_URL) return {};
  return { ...(publicUrl && { PUBLIC_URL: publicUrl }), ...(local.provider && issuer && { OIDC_ISSUER: issuer }) };
}

async function run(command, { needs, args }, guard) {
  makeLocalFolders();
  const settled = settle();
  if (settled.local.database) await ensureDebianPackages(['postgresql']);
  await ensurePackages();
  await ensureBuilt(['backend']);
  const database = settled.local.database ? await localDatabase(settled.secrets, guard) : { addresses: {} };
  const env = withDatabase({ ...settled.env, ...ofLastStart(settled.local), ...database.addresses }, [needs]);
  try {
    const { code } = await runCommand(process.execPath, [resolve(CLONE, `dist/backend/src/cli/${command}.js`), ...args], { env, show: true, cwd: process.env.INIT_CWD });
    process.exitCode = code;
  } finally {
    await database.part?.stop();
  }
}

/** `needs`: the one database address that the command may have. */
export async function maintain(command, { needs }) {
  const guard = startGuard();
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => {});
  try {
    await run(command, { needs, args: process.argv.slice(2) }, guard);
  } catch (error) {
    fail(error);
  } finally {
    await guard.close();
  }
}
