import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { isAbsolute, join, normalize, sep } from 'node:path';
import { z } from 'zod';

const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

/** A path below the backup's or the storage's folder, never out of it. */
const innerPath = z.string().min(1).refine((path) => !isAbsolute(path) && normalize(path) === path && path.split(sep)[0] !== '..', 'leads out of the backup');
const entry = z.object({ path: innerPath, bytes: z.number().int().min(0), sha256 });
export type ManifestEntry = z.infer<typeof entry>;

/** What a backup holds: the database and the stored files, each with its length and hash. */
const manifest = z.object({
  format: z.literal('crosstie-backup-1'),
  madeAt: z.iso.datetime(),
  schema: z.string(),
  database: entry,
  files: z.array(entry),
});
export type Manifest = z.infer<typeof manifest>;

export const MANIFEST = 'manifest.json';
export const DUMP = 'database.dump';
export const FILES = 'files';

/** A backup that cannot be made or restored; the message says why and what to do. */
export class BackupError extends Error {
  override name = 'BackupError';
}

export async function readManifest(folder: string): Promise<Manifest> {
  const text = await readFile(join(folder, MANIFEST), 'utf8').catch(() => {
    throw new BackupError(`${folder} holds no ${MANIFEST}: it is no backup, or one that was never completed.`);
  });
  const parsed = manifest.safeParse(parseJson(text));
  if (!parsed.success) throw new BackupError(`${join(folder, MANIFEST)} cannot be read: ${parsed.error.issues[0].path.join('.')}: ${parsed.error.issues[0].message}`);
  return parsed.data;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

export async function describeFile(file: string, path: string): Promise<ManifestEntry> {
  const hash = createHash('sha256');
  let bytes = 0;
  for await (const chunk of createReadStream(file) as AsyncIterable<Buffer>) {
    hash.update(chunk);
    bytes += chunk.length;
  }
  return { path, bytes, sha256: hash.digest('hex') };
}

/** Throws when the file is not byte for byte what the manifest says. */
export async function verifyFile(file: string, expected: ManifestEntry): Promise<void> {
  const found = await describeFile(file, expected.path).catch(() => {
    throw new BackupError(`${file} is missing or unreadable. Nothing was restored.`);
  });
  if (found.sha256 === expected.sha256 && found.bytes === expected.bytes) return;
  throw new BackupError(`${file} is not what the manifest says: it has changed since the backup. Nothing was restored.`);
}
