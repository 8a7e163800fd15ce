import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { setTimeout as delay } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const harness = fileURLToPath(new URL('../support/launcher-harness.mjs', import.meta.url));
let folder: string;
beforeAll(() => { folder = mkdtempSync(join(tmpdir(), 'crosstie-launcher-')); });
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** A zombie that nobody reaped is dead too. */
function lives(pid: number): boolean {
  try {
    return !/^State:\s+Z/m.test(readFileSync(`/proc/${pid}/status`, 'utf8'));
  } catch {
    return false;
  }
}

async function gone(pids: number[]): Promise<boolean> {
  for (let tenths = 0; tenths < 150 && pids.some(lives); tenths++) await delay(100);
  return !pids.some(lives);
}

async function launch(): Promise<{ child: ChildProcess; parts: number[]; ended: Promise<unknown[]>; said: () => string }> {
  const child = spawn(process.execPath, [harness, mkdtempSync(join(folder, 'run-'))], { stdio: ['ignore', 'pipe', 'pipe'], env: { ...process.env, npm_lifecycle_event: '' } });
  let said = '';
  child.stderr.on('data', (bytes: Buffer) => { said += bytes.toString(); });
  const ended = once(child, 'exit');
  const [line] = await once(createInterface({ input: child.stdout }), 'line');
  const parts = JSON.parse(String(line)) as number[];
  expect(parts.every(lives)).toBe(true);
  return { child, parts, ended, said: () => said };
}

describe('what the launcher started', () => {
  it.each(['SIGINT', 'SIGTERM', 'SIGHUP'] as const)('ends with it on %s, and the exit is a clean one', async (signal) => {
    const { child, parts, ended } = await launch();
    child.kill(signal);
    expect(await ended).toEqual([0, null]);
    expect(parts.some(lives)).toBe(false);
  });

  it('ends after it when it is killed outright', async () => {
    const { child, parts, ended } = await launch();
    child.kill('SIGKILL');
    await ended;
    expect(await gone(parts)).toBe(true);
  });

  it('ends with the first part that crashes, which is named with its last lines', async () => {
    const { parts, ended, said } = await launch();
    process.kill(parts[1], 'SIGKILL');
    expect(await ended).toEqual([1, null]);
    expect(parts.some(lives)).toBe(false);
    expect(said()).toContain('The second ended unexpectedly (signal SIGKILL)');
    expect(said()).toContain('at work');
  });
});
