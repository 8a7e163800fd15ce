/** A lock between processes of one clone: npm start beside npm test must not install or build at once. */
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { LOCAL } from './paths.mjs';

/** Whether a process lives; one of another user counts as alive. */
export function isAlive(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
}

function take(folder) {
  try {
    mkdirSync(folder);
    writeFileSync(join(folder, 'pid'), String(process.pid));
    return true;
  } catch (error) {
    if (error.code !== 'EEXIST') throw error;
    return false;
  }
}

function holder(folder) {
  try {
    return Number(readFileSync(join(folder, 'pid'), 'utf8'));
  } catch {
    return undefined;
  }
}

/** Runs `work` while no other process of this clone holds `name`; a dead holder's lock is taken over. */
export async function withLock(name, work) {
  const folder = join(LOCAL, `${name}.lock`);
  let unreadable = 0;
  while (!take(folder)) {
    const pid = holder(folder);
    unreadable = pid === undefined ? unreadable + 1 : 0;
    if (unreadable > 20 || (pid !== undefined && !isAlive(pid))) rmSync(folder, { recursive: true, force: true });
    else await delay(100);
  }
  try {
    return await work();
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
