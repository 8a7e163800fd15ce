import { Router, type Response } from 'express';
import { z } from 'zod';
import type { LiveEvent } from '#shared/api/overview';
import { callerOf } from '../http/endpoint.js';
import type { Caller, Services } from '../http/services.js';
import type { LiveHub } from './live-hub.js';

const HEARTBEAT_MS = 15_000;

/** GET /api/events: what changed, as server-sent events. A browser's tabs share one. */
export function liveRouter(services: Services, hub: LiveHub): Router {
  const router = Router();
  router.get('/api/events', async (request, response) => {
    const caller = callerOf(request);
    const last = z.uuid().safeParse(request.headers['last-event-id']);
    response.set({ 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' });
    response.flushHeaders();
    response.write('retry: 2000\n\n');
    const stream = new Stream(services, caller, response);
    const unsubscribe = hub.subscribe((eventId) => stream.offer(eventId));
    const heartbeat = setInterval(() => void stream.beat(), HEARTBEAT_MS);
    response.on('close', () => {
      clearInterval(heartbeat);
      unsubscribe();
    });
    if (last.success) await stream.resume(last.data);
  });
  return router;
}

/** One reader's stream: events in order, each read under the reader before anything is written. */
class Stream {
  #queue: Promise<void> = Promise.resolve();

  constructor(private readonly services: Services, private readonly caller: Caller, private readonly response: Response) {}

  offer(eventId: string): void {
    this.#queue = this.#queue.then(() => this.#write(eventId)).catch((error: unknown) => {
      this.services.log.warn({ error }, 'a live event could not be read');
    });
  }

  async resume(lastEventId: string): Promise<void> {
    const missed = await this.#asReader(() => this.services.database.rows<{ id: string }>('select access.missed_events($1) as id', [lastEventId]));
    for (const { id } of missed ?? []) this.offer(id);
    await this.#queue;
  }

  /** Keeps proxies from closing the stream, and ends it when the session or the membership has ended. */
  async beat(): Promise<void> {
    const alive = await this.#asReader(async () => true);
    if (alive) this.response.write(': beat\n\n');
  }

  async #write(eventId: string): Promise<void> {
    if (this.response.destroyed) return;
    const event = await this.#asReader(() => readEvent(this.services, eventId));
    if (event) this.response.write(`id: ${eventId}\ndata: ${JSON.stringify(event)}\n\n`);
  }

  async #asReader<T>(work: () => Promise<T>): Promise<T | null> {
    const answer = await this.services.database.asPerson(this.caller.personId, async () => {
      const session = await this.services.database.row(
        'select 1 as found from sessions s where s.id = $1 and s.expires_at > now() and cardinality(access.my_programmes()) > 0', [this.caller.sessionId]);
      return session ? { value: await work() } : null;
    });
    if (!answer) this.response.end();
    return answer?.value ?? null;
  }
}

async function readEvent(services: Services, eventId: string): Promise<LiveEvent | null> {
  const row = await services.database.row<{ topic: LiveEvent['topic']; programme: string; number: string; decodeId: string | null; step: string | null; progress: number | null }>(`
    select e.topic, g.code as programme, i.number, e.decode_id as "decodeId", e.step, e.progress
    from live_events e join issues i on i.id = e.issue_id join programmes g on g.id = i.programme_id where e.id = $1`, [eventId]);
  if (!row) return null;
  const { decodeId, step, progress, ...event } = row;
  return { ...event, ...(decodeId ? { decodeId } : {}), ...(step ? { step } : {}), ...(progress !== null ? { progress } : {}) };
}
