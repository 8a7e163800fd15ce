import pg from 'pg';
import type { Logger } from 'pino';

/** An event's id, or null where some may have been missed. */
type Listener = (eventId: string | null) => void;
const CHANNEL = 'crosstie_live';
const RETRY_MS = 1000;

/**
 * One LISTEN connection for the whole server. The payload is an opaque id; whoever listens reads
 * the event again under its own person, so that nothing is written that this person may not see.
 */
export class LiveHub {
  readonly #listeners = new Set<Listener>();
  #client: pg.Client | null = null;
  #stopped = false;

  constructor(private readonly url: string, private readonly log: Pick<Logger, 'warn'>) {}

  async start(): Promise<void> {
    const client = new pg.Client({ connectionString: this.url, keepAlive: true });
    client.on('notification', ({ payload }) => {
      if (payload && /^[0-9a-f-]{36}$/.test(payload)) this.#tell(payload);
    });
    client.on('error', (error) => this.#again(error));
    client.on('end', () => this.#again(null));
    await client.connect();
    await client.query(`listen ${CHANNEL}`);
    this.#client = client;
  }

  subscribe(listener: Listener): () => void {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  async stop(): Promise<void> {
    this.#stopped = true;
    await this.#client?.end().catch(() => undefined);
  }

  #tell(eventId: string | null): void {
    for (const listener of this.#listeners) listener(eventId);
  }

  /** A lost connection comes back by itself; what happened meanwhile nobody heard. */
  #again(error: Error | null): void {
    if (this.#stopped || !this.#client) return;
    this.#client = null;
    this.log.warn({ error: error?.message }, 'the live connection broke and is opened again');
    this.#retryLater();
  }

  #retryLater(): void {
    setTimeout(() => {
      if (this.#stopped) return;
      this.start().then(() => this.#tell(null), (failed: Error) => {
        this.log.warn({ error: failed.message }, 'the live connection cannot be opened yet');
        this.#retryLater();
      });
    }, RETRY_MS).unref();
  }
}
