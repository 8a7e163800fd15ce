/** Debian's packages that Crosstie needs beside Node: installed as root, named to everybody else. */
import { existsSync, mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { IS_ROOT } from './paths.mjs';
import { mustRun, runCommand } from './run-command.mjs';
import { PlainError, say } from './say.mjs';

const POSTGRESQL_HOME = '/usr/lib/postgresql';
const CLUSTER_SETTINGS = '/etc/postgresql-common/createcluster.conf';

/** Folder of the newest PostgreSQL server's programs, or undefined; Debian puts them on no PATH. */
export function postgresqlPrograms() {
  if (!existsSync(POSTGRESQL_HOME)) return undefined;
  return readdirSync(POSTGRESQL_HOME)
    .sort((a, b) => Number(b) - Number(a))
    .map((version) => join(POSTGRESQL_HOME, version, 'bin'))
    .find((folder) => existsSync(join(folder, 'initdb')) && existsSync(join(folder, 'postgres')));
}

export function chromiumProgram() {
  return ['/usr/bin/chromium', '/usr/bin/chromium-browser'].find((path) => existsSync(path));
}

async function hasNumpy() {
  if (!existsSync('/usr/bin/python3')) return false;
  return (await runCommand('/usr/bin/python3', ['-c', 'import numpy'])).code === 0;
}

const needs = {
  postgresql: { package: 'postgresql', present: () => postgresqlPrograms() !== undefined },
  chromium: { package: 'chromium', present: () => chromiumProgram() !== undefined },
  numpy: { package: 'python3-numpy', present: hasNumpy },
};

/** Without this the package makes and starts a cluster of its own that nobody asked for. */
function declineMainCluster() {
  if (existsSync(CLUSTER_SETTINGS)) return;
  mkdirSync('/etc/postgresql-common', { recursive: true });
  writeFileSync(CLUSTER_SETTINGS, 'create_main_cluster = false\n');
}

async function install(packages, track) {
  say(`Installing ${packages.join(', ')} from Debian's packages`);
  if (packages.includes('postgresql')) declineMainCluster();
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', UCF_FORCE_CONFFOLD: '1' };
  const options = ['-y', '--no-install-recommends', '-o', 'Dpkg::Options::=--force-confold', '-o', 'DPkg::Lock::Timeout=300'];
  await mustRun('apt-get', ['update'], { env, track, purpose: 'apt-get update' });
  await mustRun('apt-get', ['install', ...options, ...packages], { env, track, purpose: `Installing ${packages.join(', ')}` });
}

/** `wanted`: keys of `needs`. An ordinary user is told the one command that root must run. */
export async function ensureDebianPackages(wanted, { track } = {}) {
  const packages = [];
  for (const name of wanted) if (!(await needs[name].present())) packages.push(needs[name].package);
  if (packages.length === 0) return;
  if (!IS_ROOT) throw new PlainError(`Not installed here: ${packages.join(', ')}. Run once:\n  ${ordinaryUserCommand(packages)}`);
  await install(packages, track);
}

function ordinaryUserCommand(packages) {
  return `sudo apt-get install --no-install-recommends ${packages.join(' ')}`;
}
