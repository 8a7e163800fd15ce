/** The npm packages of this clone: present, and exactly those of the lock. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from './lock.mjs';
import { CLONE } from './paths.mjs';
import { mustRun } from './run-command.mjs';
import { say } from './say.mjs';

function readLock(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8')).packages ?? {};
  } catch {
    return undefined;
  }
}

/** npm writes node_modules/.package-lock.json last, so that an interrupted installation has none. */
export function packagesAreCurrent() {
  const wanted = readLock(join(CLONE, 'package-lock.json'));
  const present = readLock(join(CLONE, 'node_modules/.package-lock.json'));
  if (!wanted || !present) return false;
  return Object.entries(wanted).every(([path, entry]) => {
    if (path === '' || entry.link) return true;
    const found = present[path];
    return found ? found.version === entry.version : entry.optional === true || entry.devOptional === true || entry.peer === true;
  });
}

export async function ensurePackages({ track } = {}) {
  if (packagesAreCurrent()) return;
  await withLock('packages', async () => {
    if (packagesAreCurrent()) return;
    say('Installing the packages (npm ci)');
    await mustRun('npm', ['ci', '--no-audit', '--no-fund'], { cwd: CLONE, track, purpose: 'npm ci' });
  });
}
