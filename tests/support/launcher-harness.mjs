/** A launcher with two parts that do nothing, for the tests of how they end. Prints their process numbers once they work. */
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { Launcher } from '../../backend/bin/launch/launcher.mjs';
import { lastLines } from '../../backend/bin/launch/say.mjs';

const folder = process.argv[2];
const launcher = new Launcher();
await launcher.run(async () => {
  const parts = ['first', 'second'].map((name) => launcher.start(name, {
    args: ['-e', "process.stdout.write('at work\\n'); setInterval(() => {}, 1000)"], env: process.env, logFile: join(folder, `${name}.log`),
  }));
  while (parts.some((part) => !lastLines(part))) await delay(20);
  process.stdout.write(`${JSON.stringify(parts.map(({ child }) => child.pid))}\n`);
});
process.exit(process.exitCode ?? 0);
