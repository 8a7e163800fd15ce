import { Router, type Response } from 'express';
import { z } from 'zod';
import type { LiveEvent } from '#shared/api/overview';
import { callerOf } from '../http/endpoint.js';
import { Refusal } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import type { LiveHub } from './live-hub.js';

const HEARTBEAT_MS = 15_000;
/** A browser's tabs share one; more than these are a mistake. */
const MOST_STREAMS = 20;
/** A reader that takes nothing is let go: it resumes where it stopped. */
const MOST_UNREAD_BYTES = 1_000_000;

/** GET /api/events: what changed, as server-sent events. */
export function liveRouter(services: Services, hub: LiveHub, heartbeatMs = HEARTBEAT_MS): Router {
  const router = Router();
  const open = new Map<string, number>();
  router.get('/api/events', (request, response) => {
    const caller = callerOf(request);
    const others = open.get(caller.personId) ?? 0;
    if (others >= MOST_STREAMS) throw new Refusal(429, 'too-many', 'Too many streams', 'Close some of your open pages.');
    open.set(caller.personId, others + 1);
    response.set({ 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' });
    response.flushHeaders();
    response.write('retry: 2000\n\n');
    const last = z.uuid().safeParse(request.headers['last-event-id']);
    const stream = new Stream(services, caller, response);
    if (last.success) stream.resume(last.data);
    const unsubscribe = hub.subscribe((eventId) => stream.offer(eventId));
    const heartbeat = setInterval(() => stream.beat(), heartbeatMs);
    response.on('close', () => {
      clearInterval(heartbeat);
      unsubscribe();
      open.set(caller.personId, (open.get(caller.personId) ?? 1) - 1);
      if (open.get(caller.personId) === 0) open.delete(caller.personId);
    });
  });
  return router;
}

/** Says that some events were missed: the page reads everything again. */
const READ_AGAIN: LiveEvent = { topic: 'register' };

/** One reader's stream: events in order, each read under the reader before anything is written. */
class Stream {
  #queue: Promise<void> = Promise.resolve();
  #offered: string[] = [];

  constructor(private readonly services: Services, private readonly caller: Caller, private readonly response: Response) {}

  /** An event's id, or null where some may have been missed. What is offered while others are read is read with one question. */
  offer(eventId: string | null): void {
    if (eventId === null) return this.#then(async () => this.#write(null, READ_AGAIN));
    this.#offered.push(eventId);
    if (this.#offered.length === 1) this.#then(() => this.#writeEvents(this.#offered.splice(0)));
  }

  resume(lastEventId: string): void {
    this.#then(async () => {
      const missed = await this.#asReader(() => this.services.database.rows<{ id: string | null }>('select access.missed_events($1) as id', [lastEventId]));
      const ids = (missed ?? []).map(({ id }) => id);
      if (ids.includes(null)) this.#write(null, READ_AGAIN);
      else await this.#writeEvents(ids as string[]);
    });
  }

  /** Keeps proxies from closing the stream, and ends it when the session or the membership has ended. */
  beat(): void {
    this.#then(async () => {
      if (await this.#asReader(async () => true)) this.#send(': beat\n\n');
    });
  }

  async #writeEvents(ids: readonly string[]): Promise<void> {
    if (ids.length === 0 || this.response.destroyed) return;
    const events = await this.#asReader(() => readEvents(this.services, ids));
    for (const { id, event } of events ?? []) this.#write(id, event);
  }

  #write(id: string | null, event: LiveEvent): void {
    this.#send(`${id === null ? '' : `id: ${id}\n`}data: ${JSON.stringify(event)}\n\n`);
  }

  #send(text: string): void {
    if (this.response.writableEnded || this.response.destroyed) return;
    if (this.response.writableLength > MOST_UNREAD_BYTES) this.response.destroy();
    else this.response.write(text);
  }

  /** One thing after the other; a database that is away ends no process. */
  #then(work: () => Promise<void>): void {
    this.#queue = this.#queue.then(work).catch((error: unknown) => {
      this.services.log.warn({ error }, 'a live event could not be read');
    });
  }

  /** One short transaction as the reader; null, and the end of the stream, where session or membership has ended. */
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

interface Row { id: string; topic: LiveEvent['topic']; programme: string; number: string; decodeId: string | null; step: string | null; progress: number | null }

/** Those of the events that exist for the acting person, in their order. */
async function readEvents(services: Services, ids: readonly string[]): Promise<{ id: string; event: LiveEvent }[]> {
  const rows = await services.database.rows<Row>(`
    select e.id, e.topic, g.code as programme, i.number, e.decode_id as "decodeId", e.step, e.progress
    from live_events e join issues i on i.id = e.issue_id join programmes g on g.id = i.programme_id where e.id = any($1) order by e.place`, [ids]);
  return rows.map(({ id, decodeId, step, progress, ...event }) => ({
    id, event: { ...event, ...(decodeId ? { decodeId } : {}), ...(step ? { step } : {}), ...(progress !== null ? { progress } : {}) },
  }));
}
