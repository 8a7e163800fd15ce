/** Compiles what runs: the back end to dist/, the front end to dist/frontend; only when sources changed. */
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from './lock.mjs';
import { CLONE } from './paths.mjs';
import { mustRun } from './run-command.mjs';
import { say } from './say.mjs';

const DIST = join(CLONE, 'dist');
const common = ['package.json', 'package-lock.json', 'tsconfig.json', 'shared'];
const kinds = {
  backend: { sources: [...common, 'backend/tsconfig.json', 'backend/src', 'dev-idp'], output: 'backend/src/main.js', build: buildBackend },
  frontend: { sources: [...common, 'frontend', 'fonts'], output: 'frontend/index.html', build: buildFrontend },
};

function filesBelow(path) {
  if (!existsSync(path)) return [];
  const entries = readdirSync(path, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1));
  return entries.flatMap((entry) => {
    const inside = join(path, entry.name);
    if (entry.isDirectory()) return entry.name === 'node_modules' ? [] : filesBelow(inside);
    return [inside];
  });
}

function contentHash(sources) {
  const hash = createHash('sha256');
  for (const source of sources) {
    const path = join(CLONE, source);
    const files = /\.\w+$/.test(source) ? [path] : filesBelow(path);
    for (const file of files) hash.update(`${file.slice(CLONE.length)}\0`).update(readFileSync(file)).update('\0');
  }
  return hash.digest('hex');
}

async function buildBackend(options) {
  await mustRun(process.execPath, [join(CLONE, 'node_modules/typescript/bin/tsc'), '-b', 'backend', 'dev-idp'], { ...options, purpose: 'Compiling the back end (tsc -b)' });
}

/** Built beside and swapped in, so that a server that runs meanwhile never serves half a front end. */
async function buildFrontend(options) {
  const [fresh, current, old] = ['frontend.new', 'frontend', 'frontend.old'].map((name) => join(DIST, name));
  const args = ['build', '--config', 'frontend/vite.config.ts', '--outDir', fresh, '--emptyOutDir', '--logLevel', 'warn'];
  await mustRun(process.execPath, [join(CLONE, 'node_modules/vite/bin/vite.js'), ...args], { ...options, purpose: 'Building the front end (vite build)' });
  rmSync(old, { recursive: true, force: true });
  if (existsSync(current)) renameSync(current, old);
  renameSync(fresh, current);
  rmSync(old, { recursive: true, force: true });
}

function isCurrent(kind, hash) {
  const stamp = join(DIST, `.${kind}.stamp`);
  return existsSync(join(DIST, kinds[kind].output)) && existsSync(stamp) && readFileSync(stamp, 'utf8') === hash;
}

/** True where `kind` was built from the sources as they stand. */
export function isBuilt(kind) {
  return isCurrent(kind, contentHash(kinds[kind].sources));
}

/** `wanted`: 'backend', 'frontend'. */
export async function ensureBuilt(wanted, { track } = {}) {
  await withLock('build', async () => {
    for (const kind of wanted) {
      const hash = contentHash(kinds[kind].sources);
      if (isCurrent(kind, hash)) continue;
      say(`Building the ${kind === 'backend' ? 'back end' : 'front end'}`);
      await kinds[kind].build({ cwd: CLONE, track, env: { ...process.env, NODE_ENV: 'production' } });
      writeFileSync(join(DIST, `.${kind}.stamp`), hash);
    }
  });
}
