import { spawn } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { BackupError } from './manifest.js';

const HOME = '/usr/lib/postgresql';

/** Debian puts the newest version's programs on no PATH; elsewhere PATH has them. */
function programPath(name: string): string {
  const versions = existsSync(HOME) ? readdirSync(HOME).sort((a, b) => Number(b) - Number(a)) : [];
  return versions.map((version) => join(HOME, version, 'bin', name)).find((path) => existsSync(path)) ?? name;
}

/** Runs one of PostgreSQL's programs against `url`, whose password stays out of the list of processes. */
export function runProgram(name: 'pg_dump' | 'pg_restore', args: string[], url: string): Promise<void> {
  const { username, password, hostname, port, pathname, searchParams } = new URL(url);
  const env = {
    ...process.env,
    PGHOST: decodeURIComponent(hostname), PGPORT: port || '5432', PGUSER: decodeURIComponent(username),
    PGPASSWORD: decodeURIComponent(password), PGDATABASE: decodeURIComponent(pathname.slice(1)),
    ...(searchParams.get('sslmode') ? { PGSSLMODE: searchParams.get('sslmode') ?? '' } : {}),
  };
  return new Promise((resolve, reject) => {
    const child = spawn(programPath(name), [...args, '--no-password'], { env, stdio: ['ignore', 'ignore', 'pipe'] });
    let said = '';
    child.stderr.on('data', (bytes: Buffer) => { said = (said + bytes.toString()).slice(-4000); });
    child.on('error', () => reject(new BackupError(`${name} is not installed here. Install Debian's package postgresql-client.`)));
    child.on('close', (code) => (code === 0 ? resolve() : reject(new BackupError(`${name} failed:\n${said.trim()}`))));
  });
}
