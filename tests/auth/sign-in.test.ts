import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { accountByEmail, DEMO_PASSWORD } from '#dev-idp/accounts';
import { Visitor } from '../support/visitor.js';
import { invite, makeParty, openStage, type Stage } from './sign-in-stage.js';

const INES = 'ines.torvald@tarnbeck.example';
const RAO = 'rao.lindqvist@vimmery.example';
const UNVERIFIED = 'wen.callowhay@tarnbeck.example';

let stage: Stage;
let party: { programmeId: string; partyId: string };

beforeAll(async () => {
  stage = await openStage();
  party = await makeParty(stage.owner, stage.issuer, 'SKH');
});
afterAll(() => stage.stop());

const signInUrl = (query: Record<string, string> = {}) => `${stage.url}/api/auth/sign-in?${new URLSearchParams(query)}`;
const sessionCookie = () => `crosstie_${new URL(stage.url).port}`;

async function accepted(email: string, query: Record<string, string> = {}): Promise<Visitor> {
  const token = `token-of-${email}-${Math.floor(performance.now() * 1000)}`;
  const subject = accountByEmail(email)?.sub;
  await stage.owner.query('delete from memberships where person_id in (select id from people where subject = $1)', [subject]);
  await invite(stage.owner, { ...party, email, token });
  const visitor = new Visitor();
  const { url } = await visitor.signIn(signInUrl({ invitation: token, ...query }), email, DEMO_PASSWORD);
  expect(url).not.toContain('outcome=');
  return visitor;
}

describe('a sign-in by invitation', () => {
  it('ends signed in, where it was begun, as the person that the provider vouches for', async () => {
    const visitor = await accepted(INES, {});
    const session = await visitor.ask(`${stage.url}/api/auth/session`);
    expect(session.status).toBe(200);
    expect((await session.json()).person).toMatchObject({ name: 'Ines Torvald', email: INES });
    expect(await (await visitor.ask(`${stage.url}/api/whoever`)).json()).toEqual({ name: 'Ines Torvald' });
  });

  it('knows the person afterwards by issuer and subject, without an invitation', async () => {
    await accepted(RAO);
    await stage.owner.query("update people set email = 'moved@elsewhere.example' where subject = 'rao-lindqvist'");
    const visitor = new Visitor();
    const { url } = await visitor.signIn(signInUrl({ returnTo: '/register?stage=raised' }), RAO, DEMO_PASSWORD);
    expect(url).toBe(`${stage.url}/register?stage=raised`);
  });

  it('keeps only hashes of the tokens it gives out', async () => {
    const visitor = await accepted(INES);
    const token = visitor.cookie(sessionCookie()) ?? '';
    expect(Buffer.from(token, 'base64url')).toHaveLength(32);
    const { rows } = await stage.owner.query('select * from sessions');
    expect(rows.length).toBeGreaterThan(0);
    expect(JSON.stringify(rows)).not.toContain(token);
  });

  it('gives the cookie to this site alone and to no script', async () => {
    const visitor = new Visitor();
    await accepted(INES);
    const form = await visitor.visit(signInUrl());
    const posted = await visitor.ask(form.url, { method: 'POST', body: new URLSearchParams({ email: INES, password: DEMO_PASSWORD }) });
    const callback = await visitor.ask(posted.headers.get('location') ?? '');
    const home = await visitor.ask(new URL(callback.headers.get('location') ?? '').href);
    const cookie = home.headers.getSetCookie().find((line) => line.startsWith(`${sessionCookie()}=`));
    expect(cookie).toMatch(/; HttpOnly/);
    expect(cookie).toMatch(/; SameSite=Lax/);
    expect(cookie).toMatch(/; Path=\//);
  });
});

describe('a refusal', () => {
  /** All that a refused person receives, without what differs from one reply to any next (date, cookies of the flow). */
  async function refusalOf(email: string, invitation?: string): Promise<unknown> {
    const visitor = new Visitor();
    const form = await visitor.visit(signInUrl(invitation ? { invitation } : {}));
    const posted = await visitor.ask(form.url, { method: 'POST', body: new URLSearchParams({ email, password: DEMO_PASSWORD }) });
    const resumed = await visitor.ask(posted.headers.get('location') ?? '');
    const reply = await visitor.ask(resumed.headers.get('location') ?? '');
    const headers = Object.fromEntries([...reply.headers].filter(([name]) => !['date', 'set-cookie', 'ratelimit', 'x-request-id'].includes(name)));
    const cookies = reply.headers.getSetCookie().map((line) => line.replace(/_sign_in_[\w-]+/, '_sign_in_X'));
    expect(visitor.cookie(sessionCookie())).toBeUndefined();
    return { status: reply.status, headers, cookies, body: await reply.text() };
  }

  it('is the same whether invited or not, whatever the reason', async () => {
    const plain = await refusalOf('sable.orrindale@outside.example');
    expect(plain).toMatchObject({ status: 303, headers: { location: '/sign-in?outcome=refused' } });

    await invite(stage.owner, { ...party, email: 'someone.else@tarnbeck.example', token: 'for-another' });
    await invite(stage.owner, { ...party, email: UNVERIFIED, token: 'unverified' });
    await invite(stage.owner, { ...party, email: 'sable.orrindale@outside.example', token: 'too-late', expires: '-1 second' });
    const elsewhere = await makeParty(stage.owner, 'https://another-provider.example', 'ELS');
    await invite(stage.owner, { ...elsewhere, email: 'sable.orrindale@outside.example', token: 'another-issuer' });

    expect(await refusalOf('sable.orrindale@outside.example', 'no-such-token')).toEqual(plain);
    expect(await refusalOf('sable.orrindale@outside.example', 'for-another')).toEqual(plain);
    expect(await refusalOf(UNVERIFIED, 'unverified')).toEqual(plain);
    expect(await refusalOf('sable.orrindale@outside.example', 'too-late')).toEqual(plain);
    expect(await refusalOf('sable.orrindale@outside.example', 'another-issuer')).toEqual(plain);
  });

  it('meets the second use of an invitation', async () => {
    await invite(stage.owner, { ...party, email: 'petra.wynnlow@pellfold.example', token: 'once-only' });
    const first = await new Visitor().signIn(signInUrl({ invitation: 'once-only' }), 'petra.wynnlow@pellfold.example', DEMO_PASSWORD);
    expect(first.url).not.toContain('outcome=');
    await stage.owner.query("update memberships set left_at = now() where person_id = (select id from people where subject = 'petra-wynnlow')");
    const second = await new Visitor().signIn(signInUrl({ invitation: 'once-only' }), 'petra.wynnlow@pellfold.example', DEMO_PASSWORD);
    expect(second.url).toContain('outcome=refused');
  });
});

describe('a reply that was not asked for', () => {
  it.each([
    ['without a sign-in under way', '?code=abc&state=def'],
    ['without state', '?code=abc'],
    ['with two states', '?code=abc&state=a&state=b'],
  ])('%s starts nothing', async (_name, query) => {
    const reply = await new Visitor().ask(`${stage.url}/api/auth/callback${query}`);
    expect([reply.status, reply.headers.get('location')]).toEqual([303, '/sign-in?outcome=expired']);
  });

  it('from another browser starts nothing there (forged sign-in)', async () => {
    const [attacker, victim] = [new Visitor(), new Visitor()];
    await accepted(INES);
    const form = await attacker.visit(signInUrl());
    const posted = await attacker.ask(form.url, { method: 'POST', body: new URLSearchParams({ email: INES, password: DEMO_PASSWORD }) });
    const resumed = await attacker.ask(posted.headers.get('location') ?? '');
    const callback = resumed.headers.get('location') ?? '';
    expect(callback).toContain('/api/auth/callback?');
    const reply = await victim.ask(callback);
    expect(reply.headers.get('location')).toBe('/sign-in?outcome=expired');
    expect(victim.cookieNames()).toEqual([]);
  });

  it('sent twice works once', async () => {
    await accepted(INES);
    const visitor = new Visitor();
    const form = await visitor.visit(signInUrl());
    const posted = await visitor.ask(form.url, { method: 'POST', body: new URLSearchParams({ email: INES, password: DEMO_PASSWORD }) });
    const callback = (await visitor.ask(posted.headers.get('location') ?? '')).headers.get('location') ?? '';
    expect((await visitor.ask(callback)).headers.get('location')).toBe('/');
    expect((await visitor.ask(callback)).headers.get('location')).toBe('/sign-in?outcome=expired');
  });

  it('lets two tabs sign in beside each other', async () => {
    await accepted(INES);
    const visitor = new Visitor();
    const [one, two] = [await visitor.visit(signInUrl({ returnTo: '/links' })), await visitor.visit(signInUrl({ returnTo: '/overview' }))];
    const post = (url: string) => visitor.visit(url, { method: 'POST', body: new URLSearchParams({ email: INES, password: DEMO_PASSWORD }) });
    expect((await post(one.url)).url).toBe(`${stage.url}/links`);
    expect((await post(two.url)).url).toBe(`${stage.url}/overview`);
  });
});

describe('signing in under another name of this machine', () => {
  it('goes on under the public one, where the cookies will be', async () => {
    const reply = await new Visitor().ask(`${stage.url.replace('127.0.0.1', 'localhost')}/api/auth/sign-in?returnTo=%2Flinks`);
    expect(reply.headers.get('location')).toBe(`${stage.url}/api/auth/sign-in?returnTo=%2Flinks`);
  });
});
