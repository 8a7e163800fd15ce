/** A second, empty cluster with the four roles: prints its addresses as JSON, lives until its standard input closes. */
import { mkdtempSync, mkdirSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { openCluster } from '../../backend/bin/launch/cluster.mjs';
import { IS_ROOT, newSecret, SYSTEM_HOME } from '../../backend/bin/launch/paths.mjs';
import { startGuard } from '../../backend/bin/launch/processes.mjs';
import { ensureDatabase, ensureRoles } from '../../backend/bin/launch/roles.mjs';
import { databaseAddresses, DATABASE } from '../../backend/bin/launch/settle.mjs';

const parent = IS_ROOT ? SYSTEM_HOME : tmpdir();
mkdirSync(parent, { recursive: true });
const home = mkdtempSync(join(parent, `crosstie-test-${process.pid}-`));
const guard = startGuard();
guard.remove(home);
const passwords = Object.fromEntries(['admin', 'owner', 'app', 'worker', 'backup'].map((name) => [name, newSecret()]));
const cluster = await openCluster({ home, password: passwords.admin, settings: { fsync: 'off' }, logFile: join(home, 'log'), guard });
await ensureRoles(cluster, passwords);
await ensureDatabase(cluster, passwords, DATABASE);
process.stdout.write(`${JSON.stringify(databaseAddresses(cluster, passwords))}\n`);
process.stdin.resume();
process.stdin.on('end', async () => {
  await cluster.part.stop();
  await guard.close();
  process.exit(0);
});
