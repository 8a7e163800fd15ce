import { copyFile, mkdir, readdir } from 'node:fs/promises';
import { dirname, join, relative } from 'node:path';
import { describeFile, type ManifestEntry } from './manifest.js';

/** Uploads under way lie here; nobody knows of them yet. */
const INCOMING = 'incoming';

/** Paths of all stored files, relative to the storage folder, sorted. */
export async function storedPaths(storageDir: string): Promise<string[]> {
  const entries = await readdir(storageDir, { withFileTypes: true, recursive: true }).catch(() => []);
  const paths = entries.filter((entry) => entry.isFile()).map((entry) => relative(storageDir, join(entry.parentPath, entry.name)));
  return paths.filter((path) => path.split('/')[0] !== INCOMING).sort();
}

/** Copies one file into a folder, keeping its path, and describes the copy. */
export async function copyInto(folder: string, from: string, path: string): Promise<ManifestEntry> {
  const target = join(folder, path);
  await mkdir(dirname(target), { recursive: true, mode: 0o700 });
  await copyFile(join(from, path), target);
  return describeFile(target, path);
}
