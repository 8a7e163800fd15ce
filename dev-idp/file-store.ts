import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Adapter, AdapterPayload } from 'oidc-provider';

interface Kept { payload: AdapterPayload; expiresAt: number | null }

/** Everything the provider must remember, in memory and in one file that each change rewrites. */
export class FileStore {
  readonly #file: string;
  readonly #kept: Map<string, Kept>;

  constructor(folder: string) {
    mkdirSync(folder, { recursive: true, mode: 0o700 });
    this.#file = join(folder, 'sessions.json');
    this.#kept = new Map(readEntries(this.#file));
  }

  get(key: string): AdapterPayload | undefined {
    const kept = this.#kept.get(key);
    if (!kept || (kept.expiresAt !== null && kept.expiresAt <= Date.now())) return undefined;
    return kept.payload;
  }

  set(key: string, payload: AdapterPayload, expiresIn?: number): void {
    this.#kept.set(key, { payload, expiresAt: expiresIn ? Date.now() + expiresIn * 1000 : null });
    this.#save();
  }

  delete(keys: string[]): void {
    for (const key of keys) this.#kept.delete(key);
    this.#save();
  }

  keysWhere(matches: (payload: AdapterPayload) => boolean): string[] {
    return [...this.#kept].filter(([, kept]) => matches(kept.payload)).map(([key]) => key);
  }

  #save(): void {
    const now = Date.now();
    for (const [key, kept] of this.#kept) if (kept.expiresAt !== null && kept.expiresAt <= now) this.#kept.delete(key);
    writeFileSync(`${this.#file}.new`, JSON.stringify([...this.#kept]), { mode: 0o600 });
    renameSync(`${this.#file}.new`, this.#file);
  }
}

function readEntries(file: string): [string, Kept][] {
  try {
    return JSON.parse(readFileSync(file, 'utf8')) as [string, Kept][];
  } catch {
    return [];
  }
}

/** oidc-provider's view of the store for one of its models. */
export function adapterFor(store: FileStore): (model: string) => Adapter {
  return (model) => {
    const key = (id: string) => `${model}:${id}`;
    const ownKeysWhere = (matches: (payload: AdapterPayload) => boolean) => store.keysWhere(matches).filter((one) => one.startsWith(`${model}:`));
    const findWhere = (matches: (payload: AdapterPayload) => boolean) => {
      const [found] = ownKeysWhere(matches);
      return found ? store.get(found) : undefined;
    };
    return {
      upsert: async (id, payload, expiresIn) => store.set(key(id), payload, expiresIn),
      find: async (id) => store.get(key(id)),
      findByUid: async (uid) => findWhere((payload) => payload.uid === uid),
      findByUserCode: async (userCode) => findWhere((payload) => payload.userCode === userCode),
      consume: async (id) => {
        const payload = store.get(key(id));
        if (payload) store.set(key(id), { ...payload, consumed: Math.floor(Date.now() / 1000) }, remaining(payload));
      },
      destroy: async (id) => store.delete([key(id)]),
      // A sign-in under way carries the grant of the session before it, and outlives it.
      revokeByGrantId: async (grantId) => store.delete(ownKeysWhere((payload) => payload.grantId === grantId)),
    };
  };
}

function remaining(payload: AdapterPayload): number | undefined {
  return payload.exp ? Math.max(1, payload.exp - Math.floor(Date.now() / 1000)) : undefined;
}
