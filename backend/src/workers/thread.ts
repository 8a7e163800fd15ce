import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { Worker } from 'node:worker_threads';

/** The folder with package.json, wherever this file runs from (source or dist). */
export function projectRoot(): string {
  let folder = dirname(fileURLToPath(import.meta.url));
  while (!existsSync(join(folder, 'package.json'))) folder = dirname(folder);
  return folder;
}

/**
 * Starts a worker thread on a module given without its extension, relative to backend/src. It
 * runs as its parent does: source under a loader in development and tests, else compiled.
 */
export function startThread(module: string, data: object, limits?: { maxOldGenerationSizeMb: number }): Worker {
  const fromSource = import.meta.url.endsWith('.ts');
  const root = projectRoot();
  const file = fromSource ? join(root, 'backend/src', `${module}.ts`) : join(root, 'dist/backend/src', `${module}.js`);
  return new Worker(join(root, 'backend/bin/thread-boot.mjs'), {
    workerData: { ...data, module: pathToFileURL(file).href },
    execArgv: fromSource ? ['--conditions', 'source'] : [],
    ...(limits ? { resourceLimits: limits } : {}),
  });
}
