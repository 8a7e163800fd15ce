import { closeSync, fstatSync, openSync, readSync } from 'node:fs';
import type { ByteSource } from './formats/bytes.js';
import { CaptureError } from './formats/captureError.js';

export interface OpenFile extends ByteSource {
  close(): void;
}

/** Opens a regular file for reading at any place. Throws CaptureError where it cannot be read. */
export function openFile(path: string): OpenFile {
  const descriptor = opened(path);
  const stat = fstatSync(descriptor);
  if (!stat.isFile()) {
    closeSync(descriptor);
    throw new CaptureError('unreadable', 'This is not a regular file. Give the file itself, not a folder or a device.');
  }
  return { size: stat.size, read: (offset, length) => readAt(descriptor, offset, Math.min(length, stat.size - offset)), close: () => closeSync(descriptor) };
}

function opened(path: string): number {
  try {
    return openSync(path, 'r');
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? 'unknown';
    if (code === 'ENOENT' || code === 'ENOTDIR') throw new CaptureError('not-found', 'There is no such file. Check the name and the folder.');
    throw new CaptureError('unreadable', `The file cannot be opened (${code}). Check that it may be read.`);
  }
}

function readAt(descriptor: number, offset: number, length: number): Uint8Array {
  const out = new Uint8Array(Math.max(0, length));
  let filled = 0;
  while (filled < out.length) {
    const got = readSync(descriptor, out, filled, out.length - filled, offset + filled);
    if (got === 0) return out.slice(0, filled);
    filled += got;
  }
  return out;
}
