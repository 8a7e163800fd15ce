import { createServer, request as httpRequest, type ClientRequest, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { setTimeout as delay } from 'node:timers/promises';
import { Client } from 'pg';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { until } from '../support/until.js';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

const HEARTBEAT_MS = 400;
let world: World;
let server: Server;
let path = '';
const streams: Subscriber[] = [];

beforeAll(async () => {
  world = await createWorld({}, { heartbeatMs: HEARTBEAT_MS });
  server = createServer(world.app).listen(0, '127.0.0.1');
  const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
  path = `/api/issues/SKH/${filed.body.number}`;
});
afterEach(() => {
  for (const stream of streams.splice(0)) stream.close();
});
afterAll(async () => {
  server.closeAllConnections();
  server.close();
  await world.close();
});

/** A browser's EventSource, reduced to what it hears. */
class Subscriber {
  readonly events: { id: string | undefined; data: { topic: string; number?: string } }[] = [];
  text = '';
  status = 0;
  ended = false;
  readonly #request: ClientRequest;

  constructor(cookie: string, lastEventId?: string) {
    const { port } = server.address() as AddressInfo;
    this.#request = httpRequest({ host: '127.0.0.1', port, path: '/api/events', headers: { cookie, ...(lastEventId ? { 'last-event-id': lastEventId } : {}) } });
    this.#request.on('response', (response) => {
      this.status = response.statusCode ?? 0;
      response.on('data', (part: Buffer) => this.#hear(part.toString()));
      response.on('end', () => { this.ended = true; });
      response.on('error', () => { this.ended = true; });
    });
    this.#request.on('error', () => { this.ended = true; });
    this.#request.end();
    streams.push(this);
  }

  #hear(part: string): void {
    this.text += part;
    this.events.length = 0;
    for (const block of this.text.split('\n\n').slice(0, -1)) {
      const data = /^data: (.*)$/m.exec(block)?.[1];
      if (data) this.events.push({ id: /^id: (.*)$/m.exec(block)?.[1], data: JSON.parse(data) });
    }
  }

  get lastId(): string {
    return this.events.at(-1)?.id ?? '';
  }

  close(): void {
    this.#request.destroy();
  }
}

async function subscribe(person: PersonKey, lastEventId?: string): Promise<Subscriber> {
  const stream = new Subscriber(world.cookieOf(person), lastEventId);
  await until('the stream is open', async () => stream.text.includes('retry:'));
  return stream;
}
const heard = (stream: Subscriber, count: number) => until(`${count} events are heard`, async () => stream.events.length >= count, { timeoutMs: 20_000, everyMs: 20 });
/** Long enough for whatever was on its way. */
const quiet = () => delay(3 * HEARTBEAT_MS);
const write = async (person: PersonKey, reach = 'everyone') => expect((await world.as(person).post(`${path}/entries`).send({ body: 'A word.', reach })).status).toBe(200);

/** Events on the issue in an open transaction of their own. */
async function plantEvents(count: number): Promise<{ ids: string[]; commit(): Promise<void> }> {
  const client = new Client({ connectionString: world.database.adminUrl });
  await client.connect();
  await client.query('begin');
  const ids: string[] = [];
  for (let k = 0; k < count; k++) {
    const { rows } = await client.query<{ id: string }>(`
      insert into live_events (programme_id, issue_id, topic) select programme_id, id, 'issue' from issues where number = $1 returning id`, [path.slice(-4)]);
    ids.push(rows[0].id);
  }
  return { ids, async commit() { await client.query('commit'); await client.end(); } };
}

describe('a stream of events', () => {
  it('tells those on the issue that it changed, and nobody else', async () => {
    const [rao, ines, petra, osk] = [await subscribe('rao'), await subscribe('ines'), await subscribe('petra'), await subscribe('osk')];
    await write('mara');
    await Promise.all([heard(rao, 1), heard(ines, 1), heard(osk, 1)]);
    expect(rao.events[0].data).toEqual({ topic: 'issue', programme: 'SKH', number: path.slice(-4) });
    await quiet();
    expect(petra.events).toEqual([]);
    expect(petra.text).toContain(': beat');
  });

  it('tells of what one party alone may read to that party alone', async () => {
    const [rao, ines, mara] = [await subscribe('rao'), await subscribe('ines'), await subscribe('mara')];
    await write('rao', 'my-party');
    await heard(rao, 1);
    await quiet();
    expect(ines.events).toEqual([]);
    expect(mara.events).toEqual([]);
  });

  it('resumes by the last event that was heard, with what exists for its reader', async () => {
    const first = await subscribe('ines');
    await write('mara');
    await heard(first, 1);
    const { lastId } = first;
    first.close();
    await write('mara');
    await write('rao', 'my-party');
    await write('rao');
    const second = await subscribe('ines', lastId);
    await heard(second, 2);
    await quiet();
    expect(second.events).toHaveLength(2);
    expect(new Set(second.events.map(({ id }) => id)).size).toBe(2);
    expect(second.events.map(({ id }) => id)).not.toContain(lastId);
  });

  it('resumes also with what was written before the last event that was heard, and committed after it', async () => {
    const slow = await plantEvents(1);
    const stream = await subscribe('ines');
    const quick = await plantEvents(1);
    await quick.commit();
    await heard(stream, 1);
    expect(stream.lastId).toBe(quick.ids[0]);
    stream.close();
    await slow.commit();
    const resumed = await subscribe('ines', quick.ids[0]);
    await heard(resumed, 1);
    expect(resumed.events.map(({ id }) => id)).toContain(slow.ids[0]);
  });

  it('repeats nothing of what had committed before, and tells one transaction\'s events in their order', async () => {
    const before = await plantEvents(1);
    await before.commit();
    const three = await plantEvents(3);
    await three.commit();
    const resumed = await subscribe('ines', three.ids[0]);
    await heard(resumed, 2);
    await quiet();
    expect(resumed.events.map(({ id }) => id)).toEqual(three.ids.slice(1));
  });

  it('asks for everything to be read again where what was missed is gone', async () => {
    const stream = await subscribe('ines', crypto.randomUUID());
    await heard(stream, 1);
    expect(stream.events).toEqual([{ id: undefined, data: { topic: 'register' } }]);
  });

  it('ends within a heartbeat of the session\'s end', async () => {
    const stream = await subscribe('rao');
    await world.admin.query("update sessions set expires_at = now() - interval '1 second' where person_id = $1", [world.people.rao]);
    await until('the stream has ended', async () => stream.ended, { timeoutMs: 15_000, everyMs: 20 });
    expect((await world.as('rao').get('/api/events')).status).toBe(401);
    await world.admin.query("update sessions set expires_at = now() + interval '1 hour' where person_id = $1", [world.people.rao]);
  });

  it('writes nothing more to somebody who has left, and ends', async () => {
    const stream = await subscribe('jory');
    await world.admin.query('update memberships set left_at = now() where person_id = $1', [world.people.jory]);
    await until('the stream has ended', async () => stream.ended, { timeoutMs: 15_000, everyMs: 20 });
    expect(stream.events).toEqual([]);
    await world.admin.query('update memberships set left_at = null where person_id = $1', [world.people.jory]);
  });

  it('is heard over one connection that listens, and holds no transaction open', async () => {
    const all = await Promise.all(Array.from({ length: 8 }, () => subscribe('ines')));
    await write('mara');
    await Promise.all(all.map((stream) => heard(stream, 1)));
    const { rows: listening } = await world.admin.query("select 1 from pg_stat_activity where datname = current_database() and query ilike 'listen %'");
    expect(listening).toHaveLength(1);
    for (let sample = 0; sample < 10; sample++) {
      const { rows } = await world.admin.query("select query from pg_stat_activity where datname = current_database() and state like 'idle in transaction%' and state_change < now() - interval '1 second'");
      expect(rows).toEqual([]);
      await delay(100);
    }
  });

  it('is not opened without end by one person', async () => {
    const all = Array.from({ length: 25 }, () => new Subscriber(world.cookieOf('petra')));
    await until('each has its answer', async () => all.every(({ status }) => status !== 0));
    expect(all.filter(({ status }) => status === 200)).toHaveLength(20);
    expect(all.filter(({ status }) => status === 429)).toHaveLength(5);
  });

  it('comes back after the database has cut the listening connection, and says that something may be missing', async () => {
    const stream = await subscribe('ines');
    await world.admin.query("select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and query ilike 'listen %'");
    await heard(stream, 1);
    expect(stream.events[0].data).toEqual({ topic: 'register' });
    await write('mara');
    await heard(stream, 2);
    expect(stream.events[1].data.topic).toBe('issue');
  });
});
