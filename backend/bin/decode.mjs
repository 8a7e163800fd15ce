/** `npm run decode`: the compiled command where it is built from these very sources, else the sources themselves. */
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { isBuilt } from './launch/build.mjs';
import { CLONE } from './launch/paths.mjs';

if (isBuilt('backend')) {
  await import('../../dist/backend/src/cli/decode.js');
} else {
  const source = join(CLONE, 'backend/src/cli/decode.ts');
  const loader = ['--conditions', 'source', '--import', import.meta.resolve('tsx')];
  const child = spawn(process.execPath, [...loader, source, ...process.argv.slice(2)], { stdio: 'inherit' });
  for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => child.kill(signal));
  child.on('exit', (code, signal) => { process.exitCode = code ?? (signal ? 1 : 0); });
}
