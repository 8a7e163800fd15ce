import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import { Client } from 'pg';
import { BackupError, FILES, readManifest, verifyFile, type Manifest } from './manifest.js';
import { runProgram } from './postgres-program.js';
import { copyInto, storedPaths } from './stored-files.js';

export interface RestorePlan {
  source: string;
  /** As the owner role, into a database without tables. */
  ownerUrl: string;
  /** A storage folder without files. */
  storageDir: string;
}

/** Restores a whole backup into an empty database and an empty storage folder; checks all hashes first. */
export async function restore({ source, ownerUrl, storageDir }: RestorePlan): Promise<Manifest> {
  const manifest = await readManifest(source);
  await verifyFile(join(source, manifest.database.path), manifest.database);
  for (const file of manifest.files) await verifyFile(join(source, FILES, file.path), file);
  await refuseOccupied(ownerUrl, storageDir);
  // Files first: the database is restored in one transaction, so a failure leaves it empty to try again.
  await mkdir(storageDir, { recursive: true, mode: 0o700 });
  for (const { path } of manifest.files) await copyInto(storageDir, join(source, FILES), path);
  await runProgram('pg_restore', ['--exit-on-error', '--single-transaction', '--no-owner', `--dbname=${databaseOf(ownerUrl)}`, join(source, manifest.database.path)], ownerUrl);
  return manifest;
}

function databaseOf(url: string): string {
  return decodeURIComponent(new URL(url).pathname.slice(1));
}

async function refuseOccupied(ownerUrl: string, storageDir: string): Promise<void> {
  const files = await storedPaths(storageDir);
  if (files.length > 0) throw new BackupError(`The storage folder ${storageDir} holds ${files.length} files. Restore goes into an empty one.`);
  const client = new Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    const { rowCount } = await client.query("select 1 from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname !~ '^(pg_|information_schema)' limit 1");
    if (rowCount) throw new BackupError('The database has tables already. Restore goes into an empty one, before the first npm start.');
  } finally {
    await client.end();
  }
}
