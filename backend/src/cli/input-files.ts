import { createHash } from 'node:crypto';
import { existsSync, readFileSync, statSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { Worker } from 'node:worker_threads';
import { openFile, type OpenFile } from '../captures/fileBytes.js';
import { CaptureError } from '../captures/formats/captureError.js';

/** `npm run` changes the folder; INIT_CWD is where the person stood. */
export function resolvePath(name: string): string {
  const from = process.env['INIT_CWD'] ?? process.cwd();
  const first = resolve(from, name);
  return existsSync(first) ? first : resolve(name);
}

export interface Digest {
  readonly sha256: string;
  /** Only for files that state one to hold against. */
  readonly sha512: string | null;
}

const SMALL_BYTES = 8 * 1024 * 1024;

/** Reads the file in pieces; a large one in a thread of its own, so that the decode does not wait. */
export function digest(path: string, withSha512 = false): Promise<Digest> {
  return statSync(path).size <= SMALL_BYTES ? Promise.resolve(digestNow(path, withSha512)) : digestAside(path, withSha512);
}

function digestNow(path: string, withSha512: boolean): Digest {
  const bytes = readFileSync(path);
  const hash = (name: string): string => createHash(name).update(bytes).digest('hex');
  return { sha256: hash('sha256'), sha512: withSha512 ? hash('sha512') : null };
}

/** Source of the thread: plain JavaScript, since a loader for TypeScript does not reach threads. */
const THREAD = `
const { parentPort, workerData } = require('node:worker_threads');
const { createHash } = require('node:crypto');
const { openSync, readSync } = require('node:fs');
const names = workerData.withSha512 ? ['sha256', 'sha512'] : ['sha256'];
const hashes = names.map((name) => createHash(name));
const file = openSync(workerData.path, 'r');
const piece = Buffer.alloc(1 << 22);
for (let got; (got = readSync(file, piece, 0, piece.length, null)) > 0;) for (const hash of hashes) hash.update(piece.subarray(0, got));
parentPort.postMessage(hashes.map((hash) => hash.digest('hex')));`;

function digestAside(path: string, withSha512: boolean): Promise<Digest> {
  return new Promise((done, failed) => {
    const thread = new Worker(THREAD, { eval: true, workerData: { path, withSha512 } });
    thread.once('message', ([sha256, sha512]: string[]) => done({ sha256: sha256!, sha512: sha512 ?? null }));
    thread.once('error', failed);
  });
}

/** A file beside another, or null; a name that leaves the folder was refused before. */
export function besideFile(path: string, opened: OpenFile[]): (name: string) => OpenFile | null {
  return (name) => {
    const other = join(dirname(path), name);
    if (!existsSync(other)) return null;
    const file = openFile(other);
    opened.push(file);
    return file;
  };
}

/** The bytes of a small text file. Throws CaptureError where it cannot be read or is larger than `most`. */
export function readSmall(path: string, most: number): Uint8Array {
  const file = openFile(path);
  try {
    if (file.size > most) throw new CaptureError('too-large', `The file has ${file.size} bytes; at most ${most} are read. Give the part of the configuration that describes the radio.`);
    return file.read(0, file.size);
  } finally {
    file.close();
  }
}
