import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { DEMO_PASSWORD } from '#dev-idp/accounts';
import { Visitor } from '../support/visitor.js';
import { invite, makeParty, openStage, type Stage } from './sign-in-stage.js';

const INES = 'ines.torvald@tarnbeck.example';
let stage: Stage;

beforeAll(async () => {
  stage = await openStage();
  const party = await makeParty(stage.owner, stage.issuer, 'SKH');
  await invite(stage.owner, { ...party, email: INES, token: 'first' });
  await new Visitor().signIn(`${stage.url}/api/auth/sign-in?invitation=first`, INES, DEMO_PASSWORD);
});
afterAll(() => stage.stop());

const sessionCookie = () => `crosstie_${new URL(stage.url).port}`;
const own = { 'x-crosstie': '1' };

async function signedIn(visitor = new Visitor()): Promise<Visitor> {
  await visitor.signIn(`${stage.url}/api/auth/sign-in`, INES, DEMO_PASSWORD);
  expect(await status(visitor)).toBe(200);
  return visitor;
}

async function status(visitor: Visitor): Promise<number> {
  return (await visitor.ask(`${stage.url}/api/auth/session`)).status;
}

const signOut = (visitor: Visitor, headers: Record<string, string> = own) => visitor.ask(`${stage.url}/api/auth/sign-out`, { method: 'POST', headers });

describe('a session', () => {
  it('is a new one at each sign-in, and the one before is dead', async () => {
    const visitor = await signedIn();
    const before = visitor.cookie(sessionCookie()) ?? '';
    await signedIn(visitor);
    expect(visitor.cookie(sessionCookie())).not.toBe(before);
    const thief = new Visitor();
    thief.setCookie(sessionCookie(), before);
    expect(await status(thief)).toBe(401);
  });

  it('never takes the name that a visitor brings along', async () => {
    const visitor = new Visitor();
    visitor.setCookie(sessionCookie(), 'chosen-by-somebody-else');
    await signedIn(visitor);
    expect(visitor.cookie(sessionCookie())).not.toBe('chosen-by-somebody-else');
  });

  it.each([
    ['idle', 'expires_at = now() - interval \'1 second\''],
    ['absolute', 'expires_at = now() - interval \'1 second\', absolute_expires_at = now() - interval \'1 second\''],
  ])('ends when its %s time is over', async (_name, change) => {
    const visitor = await signedIn();
    await stage.owner.query(`update sessions set ${change}`);
    expect(await status(visitor)).toBe(401);
  });

  it('lives on while it is used, but never past its absolute end', async () => {
    const visitor = await signedIn();
    await stage.owner.query("update sessions set last_seen_at = now() - interval '2 minutes', expires_at = now() + interval '1 minute', absolute_expires_at = now() + interval '2 hours'");
    expect(await status(visitor)).toBe(200);
    const { rows } = await stage.owner.query("select max(expires_at) > now() + interval '1 hour 59 minutes' as renewed, max(expires_at) <= max(absolute_expires_at) as bounded from sessions");
    expect(rows[0]).toEqual({ renewed: true, bounded: true });
  });

  it('ends with the last membership, at the next request', async () => {
    const visitor = await signedIn();
    await stage.owner.query('update memberships set left_at = now()');
    expect(await status(visitor)).toBe(401);
    await stage.owner.query('update memberships set left_at = null');
  });
});

describe('signing out', () => {
  it('ends the session here and at the provider, which then asks for the password again', async () => {
    const visitor = await signedIn();
    const token = visitor.cookie(sessionCookie()) ?? '';
    const reply = await signOut(visitor);
    const { redirectTo } = (await reply.json()) as { redirectTo: string };
    expect(redirectTo).toContain(`${stage.issuer}/session/end?`);
    expect(visitor.cookie(sessionCookie())).toBeUndefined();
    const thief = new Visitor();
    thief.setCookie(sessionCookie(), token);
    expect(await status(thief)).toBe(401);

    const page = await (await visitor.ask(redirectTo)).text();
    expect(page).toContain('/look/sign-out.js');
    const xsrf = /name="xsrf" value="([^"]+)"/.exec(page)?.[1] ?? '';
    const ended = await visitor.ask(`${stage.issuer}/session/end/confirm`, { method: 'POST', body: new URLSearchParams({ xsrf, logout: 'yes' }) });
    expect(ended.headers.get('location')).toBe(`${stage.url}/`);
    const again = await visitor.visit(`${stage.url}/api/auth/sign-in`);
    expect(new URL(again.url).pathname).toMatch(/^\/interaction\//);
  });

  it.each([
    ['without the header of our own pages', {}],
    ['from another origin', { ...own, origin: 'http://elsewhere.example' }],
    ['from an opaque origin', { ...own, origin: 'null' }],
    ['from another site', { ...own, 'sec-fetch-site': 'cross-site' }],
    ['from another port of this machine', { ...own, 'sec-fetch-site': 'same-site' }],
  ])('%s is refused and ends nothing', async (_name, headers) => {
    const visitor = await signedIn();
    const reply = await signOut(visitor, headers as Record<string, string>);
    expect(reply.status).toBe(403);
    expect(reply.headers.get('content-type')).toContain('application/problem+json');
    expect(await status(visitor)).toBe(200);
  });

  it('from our own origin is let through', async () => {
    const visitor = await signedIn();
    expect((await signOut(visitor, { ...own, origin: stage.url, 'sec-fetch-site': 'same-origin' })).status).toBe(200);
  });
});

describe('the local provider', () => {
  it('knows who is signed in after a restart', async () => {
    const visitor = await signedIn();
    await stage.restartProvider();
    const again = await visitor.visit(`${stage.url}/api/auth/sign-in?returnTo=/links`);
    expect(again.url).toBe(`${stage.url}/links`);
  });

  it('asks for the password when the sign-in says so', async () => {
    const visitor = await signedIn();
    const again = await visitor.visit(`${stage.url}/api/auth/sign-in?again=1`);
    expect(new URL(again.url).pathname).toMatch(/^\/interaction\//);
  });

  it('refuses a wrong password', async () => {
    const visitor = new Visitor();
    const { response } = await visitor.signIn(`${stage.url}/api/auth/sign-in`, INES, 'not-the-password');
    expect(response.status).toBe(401);
    expect(await status(visitor)).toBe(401);
  });

  it('takes no request without a proof key', async () => {
    const query = new URLSearchParams({ client_id: 'crosstie', response_type: 'code', scope: 'openid', redirect_uri: `${stage.url}/api/auth/callback`, state: 's' });
    const reply = await new Visitor().ask(`${stage.issuer}/auth?${query}`);
    expect(reply.headers.get('location')).toMatch(/error=invalid_request/);
  });
});
