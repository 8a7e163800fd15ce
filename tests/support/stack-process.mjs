/**
 * The whole product on a database that the environment names: provider, mail catcher, worker, server, as
 * npm start runs them. Prints `ready`, lives until its standard input closes, leaves nothing running.
 */
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { Launcher } from '../../backend/bin/launch/launcher.mjs';
import { startLocalServices, startProduct } from '../../backend/bin/launch/parts.mjs';
import { settle } from '../../backend/bin/launch/settle.mjs';

const folder = process.env.CROSSTIE_STACK_DIR;
mkdirSync(join(folder, 'logs'), { recursive: true });
const settled = { ...settle(), folder };
const launcher = new Launcher();
process.stdin.resume();
process.stdin.on('end', () => void launcher.stop());
await launcher.run(async () => {
  await startLocalServices(launcher, settled);
  await startProduct(launcher, settled);
  process.stdout.write('ready\n');
});
process.exit(process.exitCode ?? 0);
