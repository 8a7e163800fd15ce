/**
 * The first file of every worker thread. Worker threads do not inherit a TypeScript loader, so a
 * thread that runs source registers it here; compiled code needs none.
 */
import { workerData } from 'node:worker_threads';

if (workerData.module.endsWith('.ts')) {
  const { register } = await import('tsx/esm/api');
  register();
}
await import(workerData.module);
