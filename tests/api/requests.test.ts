import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import request from 'supertest';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import { createWorld, issueOn, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld({ UPLOADS_PER_MINUTE: '3', PUBLIC_URL: 'http://127.0.0.1:4180' });
});
afterAll(() => world.close());

const filled = (path: string) => path.replace(':programme', 'SKH').replace(':number', '1234').replace(/:\w+Id/g, crypto.randomUUID());
const names = Object.keys(ENDPOINTS) as EndpointName[];
const all = names.map((name) => ({ name, method: ENDPOINTS[name].method.toLowerCase() as 'get' | 'post' | 'patch' | 'put' | 'delete', path: filled(ENDPOINTS[name].path) }));
const STREAMS = [{ name: 'export', method: 'get' as const, path: '/api/issues/export' }, { name: 'download', method: 'get' as const, path: `/api/files/${crypto.randomUUID()}/content` }, { name: 'events', method: 'get' as const, path: '/api/events' }];
const changing = [...all.filter(({ method }) => method !== 'get'), { name: 'sign-out', method: 'post' as const, path: '/api/auth/sign-out' }];

describe('without a session', () => {
  it('every address answers 401, existing or not, whatever the method, with the same words', async () => {
    const unknown = (['get', 'post', 'patch', 'put', 'delete'] as const).map((method) => ({ name: 'nothing', method, path: '/api/nothing/here' }));
    const bodies = new Set<string>();
    for (const { name, method, path } of [...all, ...STREAMS, ...unknown]) {
      const answer = await world.anonymous()[method](path);
      expect(answer.status, `${name}: ${method} ${path}`).toBe(401);
      bodies.add(answer.text);
    }
    expect(bodies.size).toBe(1);
  });

  it('a cookie that is no session\'s is no session', async () => {
    for (const cookie of ['crosstie_4180=abc', `crosstie_4180=${'x'.repeat(4000)}`, 'crosstie_4180=%ff%00', 'crosstie_9999=abc', "crosstie_4180=' or true --"]) {
      expect((await request(world.app).get('/api/me').set('cookie', cookie)).status, cookie).toBe(401);
    }
  });

  it('leaving the programme ends all at the next request', async () => {
    expect((await world.as('jory').get('/api/me')).status).toBe(200);
    await world.admin.query('update memberships set left_at = now() where person_id = $1', [world.people.jory]);
    expect((await world.as('jory').get('/api/me')).status).toBe(401);
    expect((await world.as('jory').get('/api/issues')).status).toBe(401);
  });
});

describe('a request that changes something', () => {
  const signedIn = (method: 'post' | 'patch' | 'put' | 'delete', path: string) => request(world.app)[method](path).set('cookie', world.cookieOf('mara'));
  const HEADERS: [string, Record<string, string>][] = [
    ['without the header of Crosstie\'s own pages', {}],
    ['from a foreign page', { 'x-crosstie': '1', origin: 'https://elsewhere.example' }],
    ['from another port of this host', { 'x-crosstie': '1', origin: 'http://127.0.0.1:9999' }],
    ['from an opaque origin', { 'x-crosstie': '1', origin: 'null' }],
    ['that the browser calls cross-site', { 'x-crosstie': '1', 'sec-fetch-site': 'cross-site' }],
  ];

  it.each(HEADERS)('%s is refused everywhere', async (_what, headers) => {
    expect(changing.length).toBeGreaterThan(25);
    for (const { name, method, path } of changing) {
      const answer = await signedIn(method as 'post', path).set(headers);
      expect({ name, status: answer.status, code: answer.body.code }).toEqual({ name, status: 403, code: 'foreign-request' });
    }
  });

  it('from Crosstie\'s own pages is taken', async () => {
    const answer = await signedIn('post', '/api/day-sheet/looks').set({ 'x-crosstie': '1', origin: 'http://127.0.0.1:4180', 'sec-fetch-site': 'same-origin' });
    expect(answer.status).toBe(204);
  });
});

describe('a body', () => {
  it('that is too large, or is not JSON, is refused in words', async () => {
    const large = await world.as('mara').post('/api/issues').send({ ...issueOn(world), description: 'x'.repeat(300_000) });
    expect([large.status, large.body.code]).toEqual([413, 'too-large']);
    const broken = await world.as('mara').post('/api/issues').set('content-type', 'application/json').send('{"title": ');
    expect([broken.status, broken.body.code]).toEqual([400, 'malformed']);
    expect((await world.as('mara').post('/api/issues').set('content-type', 'text/plain').send('title=x')).status).toBe(422);
  });

  it('that misses fields is told which, in RFC 9457 problem details', async () => {
    const { status, headers, body } = await world.as('mara').post('/api/issues').send(issueOn(world, { title: 'x', severity: 'blocker' }));
    expect(status).toBe(422);
    expect(headers['content-type']).toContain('application/problem+json');
    expect(body).toMatchObject({ type: 'about:blank', title: expect.any(String), status: 422, code: 'invalid' });
    expect(body.errors.map(({ field }: { field: string }) => field).toSorted()).toEqual(['severity', 'title']);
  });

  it('cannot name what its address does not take', async () => {
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { stage: 'settled', number: '0001', raisedBy: world.people.ines, programmeId: crypto.randomUUID() }));
    expect(filed.status).toBe(200);
    const issue = (await world.as('mara').get(`/api/issues/SKH/${filed.body.number}`)).body;
    expect([issue.stage, issue.raisedBy.id]).toEqual(['raised', world.people.mara]);
  });
});

describe('identifiers and queries that mean harm', () => {
  it.each(["/api/issues/SKH/1' or '1'='1", '/api/issues/SKH/%00', '/api/files/..%2f..%2fetc%2fpasswd', '/api/decodes/1', '/api/issues/__proto__/1234', '/api/links/%ff'])('%s is nothing that exists', async (path) => {
    expect((await world.as('mara').get(path)).status).toBe(404);
  });

  it.each(["sort=due;drop table issues", 'size=100000', 'page=0', 'move=x', 'stages=raised&stages=settled&size[]=1', 'text=%00', "text=' | ! & <-> (", 'link=1', 'order=asc,i.id'])('the register\'s query %s fails in words or finds nothing', async (query) => {
    const answer = await world.as('mara').get(`/api/issues?${query}`);
    expect([200, 422]).toContain(answer.status);
  });
});

describe('uploads', () => {
  it('are limited by the minute, each person for themselves', async () => {
    const send = (person: 'rao' | 'ines') => world.as(person).post('/api/attachments?programme=SKH').attach('file', Buffer.from('x'), 'a.txt');
    const statuses: number[] = [];
    for (let n = 0; n < 4; n++) statuses.push((await send('rao')).status);
    expect(statuses).toEqual([201, 201, 201, 429]);
    expect((await send('ines')).status).toBe(201);
    expect((await world.as('rao').get('/api/issues')).status).toBe(200);
  });
});

describe('every answer', () => {
  it('keeps browsers from guessing, framing, running and keeping it', async () => {
    const { headers } = await world.as('mara').get('/api/me');
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['cache-control']).toBe('private, no-store');
    expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
    expect(headers['content-security-policy']).not.toMatch(/script-src[^;]*unsafe/);
    expect(headers['x-powered-by']).toBeUndefined();
    expect(headers.etag).toBeUndefined();
  });
});
