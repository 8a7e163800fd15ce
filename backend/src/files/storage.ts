import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir, readdir, rename, rm, stat, statfs } from 'node:fs/promises';
import { join } from 'node:path';
import { Transform, type Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';

/** Thrown when an upload grows past its limit. */
export class TooLarge extends Error {
  override name = 'TooLarge';
}

export interface Received {
  readonly storageId: string;
  readonly size: number;
  readonly sha256: string;
}

/**
 * Stored bytes under random names; nothing on disk tells whose they are or what they are called.
 * An upload lies in `incoming/` until it is whole, so that a half-sent file leaves nothing.
 */
export class Storage {
  /** Bytes announced by uploads that are on their way. */
  #promised = 0;

  constructor(private readonly root: string) {}

  async prepare(): Promise<void> {
    await mkdir(this.#incoming(''), { recursive: true, mode: 0o700 });
    // What lies here was cut off by a stop: nobody knows of it.
    for (const name of await readdir(this.#incoming(''))) {
      const { mtimeMs } = await stat(this.#incoming(name)).catch(() => ({ mtimeMs: 0 }));
      if (Date.now() - mtimeMs > 3_600_000) await rm(this.#incoming(name), { force: true });
    }
  }

  /** Keeps room for bytes that are to come, beside what must stay free; answers how to give it back, or null. */
  async promise(bytes: number, leaveFree: number): Promise<(() => void) | null> {
    const { bavail, bsize } = await statfs(this.root);
    if (bavail * bsize < this.#promised + bytes + leaveFree) return null;
    this.#promised += bytes;
    return () => {
      this.#promised -= bytes;
    };
  }

  /** Takes a stream to disk, hashing on the way; past `limit` it stops and leaves nothing. */
  async receive(source: Readable, limit: number): Promise<Received> {
    const storageId = crypto.randomUUID();
    const hash = createHash('sha256');
    let size = 0;
    const measure = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        size += chunk.length;
        if (size > limit) {
          done(new TooLarge());
          return;
        }
        hash.update(chunk);
        done(null, chunk);
      },
    });
    const incoming = this.#incoming(storageId);
    try {
      await pipeline(source, measure, createWriteStream(incoming, { mode: 0o600, flags: 'wx' }));
      await mkdir(join(this.path(storageId), '..'), { recursive: true, mode: 0o700 });
      await rename(incoming, this.path(storageId));
    } catch (error) {
      await rm(incoming, { force: true });
      throw error;
    }
    return { storageId, size, sha256: hash.digest('hex') };
  }

  path(storageId: string): string {
    if (!/^[0-9a-f-]{36}$/.test(storageId)) throw new Error('not a storage id');
    return join(this.root, 'files', storageId.slice(0, 2), storageId);
  }

  async remove(storageId: string): Promise<void> {
    await rm(this.path(storageId), { force: true });
  }

  #incoming(name: string): string {
    return join(this.root, 'incoming', name);
  }
}
