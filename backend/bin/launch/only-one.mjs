/** One start at a time in one clone. */
import { readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { isAlive } from './lock.mjs';
import { LOCAL } from './paths.mjs';
import { PlainError } from './say.mjs';

const FILE = join(LOCAL, 'running.json');

function isLauncher(pid) {
  if (!isAlive(pid)) return false;
  try {
    return /(start|dev)\.mjs/.test(readFileSync(`/proc/${pid}/cmdline`, 'utf8'));
  } catch {
    return false;
  }
}

function readRunning() {
  try {
    return JSON.parse(readFileSync(FILE, 'utf8'));
  } catch {
    return {};
  }
}

/** The process that runs Crosstie from this clone, or undefined. */
export function runningPid() {
  const { pid } = readRunning();
  return pid !== process.pid && isLauncher(pid) ? pid : undefined;
}

export function claimClone(publicUrl) {
  const pid = runningPid();
  if (pid) throw new PlainError(`Crosstie already runs from this folder at ${readRunning().publicUrl} (process ${pid}). Stop it with: kill ${pid}`);
  writeFileSync(FILE, JSON.stringify({ pid: process.pid, publicUrl }), { mode: 0o600 });
}

export function releaseClone() {
  if (readRunning().pid === process.pid) rmSync(FILE, { force: true });
}
