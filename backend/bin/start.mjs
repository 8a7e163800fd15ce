/** npm start: everything that Crosstie needs on this machine, from a fresh clone to a page that answers. */
import { ensureBuilt } from './launch/build.mjs';
import { ensureDebianPackages } from './launch/debian.mjs';
import { greet } from './launch/greeting.mjs';
import { Launcher } from './launch/launcher.mjs';
import { openLocalCluster } from './launch/local-cluster.mjs';
import { claimClone } from './launch/only-one.mjs';
import { ensurePackages } from './launch/packages.mjs';
import { startLocalServices, startProduct } from './launch/parts.mjs';
import { makeLocalFolders } from './launch/paths.mjs';
import { portsToListen, refuseTakenPorts } from './launch/ports.mjs';
import { prepareDatabase } from './launch/prepare.mjs';
import { settle } from './launch/settle.mjs';

async function begin(launcher) {
  const { track, guard } = launcher;
  makeLocalFolders();
  const settled = settle();
  claimClone(settled.publicUrl);
  await refuseTakenPorts(portsToListen(settled));
  if (settled.local.database) await ensureDebianPackages(['postgresql'], { track });
  await ensurePackages({ track });
  await ensureBuilt(['backend', 'frontend'], { track });
  if (settled.local.database) {
    const cluster = await openLocalCluster({ secrets: settled.secrets, guard, track });
    launcher.hold(cluster.part);
    Object.assign(settled.env, cluster.addresses);
  }
  await Promise.all([prepareDatabase({ ...settled, track }), startLocalServices(launcher, settled)]);
  await startProduct(launcher, settled);
  await greet(settled);
}

const launcher = new Launcher();
await launcher.run(() => begin(launcher));
process.exit(process.exitCode ?? 0);
