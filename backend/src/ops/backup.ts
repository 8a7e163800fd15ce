import { existsSync } from 'node:fs';
import { mkdir, rename, rm, writeFile } from 'node:fs/promises';
import { dirname, join, resolve } from 'node:path';
import { Client } from 'pg';
import { BackupError, describeFile, DUMP, FILES, MANIFEST, type Manifest, type ManifestEntry } from './manifest.js';
import { runProgram } from './postgres-program.js';
import { copyInto, storedPaths } from './stored-files.js';

export interface BackupPlan {
  /** As the backup role, which may read every row. */
  backupUrl: string;
  storageDir: string;
  /** The folder to make; it must not exist. */
  target: string;
}

/** Makes one backup; the folder has its name only when it is complete. */
export async function backUp({ backupUrl, storageDir, target }: BackupPlan): Promise<Manifest> {
  const wanted = resolve(target);
  if (existsSync(wanted)) throw new BackupError(`${wanted} exists already. Name a folder that does not.`);
  const arriving = `${wanted}.incomplete`;
  await rm(arriving, { recursive: true, force: true });
  await mkdir(dirname(wanted), { recursive: true });
  await mkdir(arriving, { mode: 0o700 });
  try {
    const manifest = await fill(arriving, backupUrl, storageDir);
    await rename(arriving, wanted);
    return manifest;
  } catch (error) {
    await rm(arriving, { recursive: true, force: true });
    throw error;
  }
}

/** The database first: a file that arrives meanwhile is one too many, never one too few. */
async function fill(folder: string, backupUrl: string, storageDir: string): Promise<Manifest> {
  const schema = await schemaOf(backupUrl);
  // Live events are for pages that are open now, and their order holds in the cluster that wrote them alone.
  await runProgram('pg_dump', ['--format=custom', '--exclude-table-data=public.live_events', `--file=${join(folder, DUMP)}`], backupUrl);
  const manifest: Manifest = {
    format: 'crosstie-backup-1',
    madeAt: new Date().toISOString(),
    schema,
    database: await describeFile(join(folder, DUMP), DUMP),
    files: await copyFiles(storageDir, join(folder, FILES)),
  };
  await writeFile(join(folder, MANIFEST), `${JSON.stringify(manifest, null, 2)}\n`, { mode: 0o600 });
  return manifest;
}

async function copyFiles(storageDir: string, target: string): Promise<ManifestEntry[]> {
  const entries: ManifestEntry[] = [];
  for (const path of await storedPaths(storageDir)) {
    try {
      entries.push(await copyInto(target, storageDir, path));
    } catch (error) {
      // Withdrawn since the folder was listed: gone is what its owner asked for.
      if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error;
    }
  }
  return entries;
}

async function schemaOf(url: string): Promise<string> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query<{ name: string }>('select name from migrations.applied order by name desc limit 1');
    return rows[0]?.name ?? '';
  } finally {
    await client.end();
  }
}
