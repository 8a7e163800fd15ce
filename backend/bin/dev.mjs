/** npm run dev: pages through Vite with hot reload, server and worker restarted at each change. */
import { ensureBuilt } from './launch/build.mjs';
import { ensureDebianPackages } from './launch/debian.mjs';
import { greet } from './launch/greeting.mjs';
import { Launcher } from './launch/launcher.mjs';
import { openLocalCluster } from './launch/local-cluster.mjs';
import { claimClone } from './launch/only-one.mjs';
import { ensurePackages } from './launch/packages.mjs';
import { startLocalServices, startPages, startProduct } from './launch/parts.mjs';
import { makeLocalFolders } from './launch/paths.mjs';
import { portsToListen, refuseTakenPorts } from './launch/ports.mjs';
import { prepareDatabase } from './launch/prepare.mjs';
import { PlainError } from './launch/say.mjs';
import { settle } from './launch/settle.mjs';

/** Vite answers on PORT and passes /api on to the server, which moves behind the other ports. */
function behindVite(settled) {
  const { ports } = settled;
  const server = ports.web + 4;
  return { ...settled, ports: { ...ports, web: server, pages: ports.web }, env: { ...settled.env, PORT: String(server), NODE_ENV: 'development' } };
}

async function begin(launcher) {
  const { track, guard } = launcher;
  makeLocalFolders();
  const settled = behindVite(settle());
  if (!settled.local.database) throw new PlainError('npm run dev works on a database of its own. Unset DATABASE_URL.');
  claimClone(settled.publicUrl);
  await refuseTakenPorts(portsToListen(settled));
  await ensureDebianPackages(['postgresql'], { track });
  await ensurePackages({ track });
  await ensureBuilt(['backend'], { track });
  const cluster = await openLocalCluster({ secrets: settled.secrets, guard, track });
  launcher.hold(cluster.part);
  Object.assign(settled.env, cluster.addresses);
  await Promise.all([prepareDatabase({ ...settled, track }), startLocalServices(launcher, settled)]);
  await startProduct(launcher, { ...settled, mode: 'development' });
  await startPages(launcher, settled);
  await greet(settled);
}

const launcher = new Launcher();
await launcher.run(() => begin(launcher));
process.exit(process.exitCode ?? 0);
