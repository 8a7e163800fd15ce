import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import type { TestDatabase } from './database.js';
import { freePort } from './listen.js';

/** The whole product, as npm start runs it, on a database of the test's own. */
export interface Stack {
  url: string;
  issuer: string;
  /** GET `${mailUrl}/messages.json`: what was sent, newest first. */
  mailUrl: string;
  storageDir: string;
  stop(): Promise<void>;
}

interface StackPlan { database: TestDatabase; ports: StackPorts; folder: string; env?: Record<string, string> }
export interface StackPorts { web: number; provider: number; mailPage: number; mailSmtp: number }

/** Ports for a stack; known before it starts, since seeded people carry the provider's address. */
export async function stackPorts(): Promise<StackPorts> {
  return { web: await freePort(), provider: await freePort(), mailPage: await freePort(), mailSmtp: await freePort() };
}

export function issuerOf(ports: StackPorts): string {
  return `http://127.0.0.1:${ports.provider}`;
}

function environment({ database, ports, folder, env }: StackPlan): NodeJS.ProcessEnv {
  return {
    ...process.env,
    NODE_ENV: 'production',
    CROSSTIE_STACK_DIR: folder,
    DATABASE_URL: database.appUrl, DATABASE_WORKER_URL: database.workerUrl, STORAGE_DIR: join(folder, 'storage'),
    PORT: String(ports.web), IDP_PORT: String(ports.provider), MAIL_PAGE_PORT: String(ports.mailPage), MAIL_SMTP_PORT: String(ports.mailSmtp),
    SIGN_INS_PER_MINUTE: '1000', UPLOADS_PER_MINUTE: '1000', MIN_FREE_BYTES: '0',
    ...env,
  };
}

/** Starts it and waits until /api/health says that all parts are up. Needs the built product (npm test builds it). */
export async function startStack(database: TestDatabase, options: { ports?: StackPorts; env?: Record<string, string> } = {}): Promise<Stack> {
  const ports = options.ports ?? (await stackPorts());
  const folder = mkdtempSync(join(tmpdir(), 'crosstie-stack-'));
  const script = fileURLToPath(new URL('stack-process.mjs', import.meta.url));
  const child = spawn(process.execPath, [script], { stdio: ['pipe', 'pipe', 'inherit'], env: environment({ database, ports, folder, ...(options.env ? { env: options.env } : {}) }) });
  const ended = once(child, 'exit');
  const ready = new Promise<boolean>((resolve) => { createInterface({ input: child.stdout }).on('line', (line) => { if (line === 'ready') resolve(true); }); });
  if (!(await Promise.race([ready, ended.then(() => false)]))) throw new Error('the product did not start; its last lines stand above');
  return {
    url: `http://127.0.0.1:${ports.web}`,
    issuer: issuerOf(ports),
    mailUrl: `http://127.0.0.1:${ports.mailPage}`,
    storageDir: join(folder, 'storage'),
    async stop() {
      child.stdin.end();
      await ended;
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
