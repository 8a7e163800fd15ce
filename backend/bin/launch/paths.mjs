/** Where this clone keeps what it must not commit. */
import { createHash, randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

export const CLONE = resolve(dirname(fileURLToPath(import.meta.url)), '../../..');
export const LOCAL = join(CLONE, '.local');
export const LOGS = join(LOCAL, 'logs');
export const IS_ROOT = process.getuid?.() === 0;

/** The system's folder for clusters of clones that root starts: `postgres` cannot enter a clone below a 0700 folder. */
export const SYSTEM_HOME = '/var/lib/crosstie';

/** Name of this clone's folder under SYSTEM_HOME: readable, and distinct for each path. */
export function cloneKey(path = CLONE) {
  const digest = createHash('sha256').update(path).digest('hex').slice(0, 12);
  return `${basename(path).replace(/[^\w.-]/g, '_')}-${digest}`;
}

export function makeLocalFolders() {
  mkdirSync(LOCAL, { recursive: true, mode: 0o700 });
  mkdirSync(LOGS, { recursive: true, mode: 0o700 });
}

const SECRETS = join(LOCAL, 'secrets.json');
const secretNames = ['admin', 'owner', 'app', 'worker', 'backup', 'session', 'client', 'instance'];

/** Generated passwords of this clone, made once, in a file that only its user reads. */
export function localSecrets() {
  const kept = existsSync(SECRETS) ? JSON.parse(readFileSync(SECRETS, 'utf8')) : {};
  const missing = secretNames.filter((name) => !kept[name]);
  if (missing.length > 0) {
    for (const name of missing) kept[name] = newSecret();
    writeFileSync(SECRETS, `${JSON.stringify(kept, null, 2)}\n`, { mode: 0o600 });
  }
  return kept;
}

/** 256 random bits, safe in an address. */
export function newSecret() {
  return randomBytes(32).toString('base64url');
}

const STATE = join(LOCAL, 'state.json');

/** What the last start settled on (ports, provider address). */
export function readState() {
  return existsSync(STATE) ? JSON.parse(readFileSync(STATE, 'utf8')) : {};
}

export function rememberState(changes) {
  writeFileSync(STATE, `${JSON.stringify({ ...readState(), ...changes }, null, 2)}\n`, { mode: 0o600 });
}
