import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import type { World } from './world.js';

/** The real worker, from source, as a process of its own. */
export interface WorkerProcess {
  /** Warnings and errors that it wrote. */
  readonly complaints: string[];
  kill(signal: 'SIGKILL' | 'SIGTERM'): Promise<void>;
}

const ROOT = fileURLToPath(new URL('../..', import.meta.url));

/** Starts a worker on the world's database and storage, and waits until it says that it runs. */
export async function startWorker(world: World, env: Record<string, string> = {}): Promise<WorkerProcess> {
  const child = spawn(process.execPath, ['--conditions', 'source', '--import', 'tsx', 'backend/src/worker.ts'], {
    cwd: ROOT, stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      ...process.env, NODE_ENV: 'test', DATABASE_URL: world.database.appUrl, DATABASE_WORKER_URL: world.database.workerUrl,
      STORAGE_DIR: world.services.config.storageDir, PUBLIC_URL: world.services.config.publicUrl, SMTP_URL: 'smtp://127.0.0.1:9', LOG_LEVEL: 'info', ...env,
    },
  });
  const complaints: string[] = [];
  child.stderr.on('data', (text: Buffer) => complaints.push(text.toString()));
  await running(child, complaints);
  return {
    complaints,
    async kill(signal) {
      if (child.exitCode !== null || child.signalCode !== null) return;
      child.kill(signal);
      await once(child, 'exit');
    },
  };
}

function running(child: ChildProcess, complaints: string[]): Promise<void> {
  return new Promise((resolve, reject) => {
    createInterface({ input: child.stdout! }).on('line', (line) => {
      const said = JSON.parse(line) as { level: number; msg: string };
      if (said.level >= 40) complaints.push(line);
      if (said.msg === 'the worker runs') resolve();
    });
    child.once('exit', (code, signal) => reject(new Error(`the worker ended with ${signal ?? code}: ${complaints.join('\n')}`)));
  });
}
