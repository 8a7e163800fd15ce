import { assert, oneof, property, string, webUrl } from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cookieNames, cookieOptions } from '#backend/auth/cookies';
import { PendingSeal, type PendingSignIn } from '#backend/auth/pending-sign-in';
import { localPath } from '#backend/auth/return-to';
import { readConfig } from '#backend/config';
import { readSettings } from '#dev-idp/settings';

describe('the place to return to', () => {
  it.each(['/', '/register?stage=raised&page=2', '/issues/SKH/4187#entry-3'])('keeps %s', (path) => {
    expect(localPath(path)).toBe(path);
  });

  it.each([
    '//elsewhere.example', '/\\elsewhere.example', '/\t/elsewhere.example', 'https://elsewhere.example', 'javascript:alert(1)',
    '/a\\..\\b', '\\\\elsewhere.example', '/%0d%0aset-cookie:a\n', 'register', '', '/api/auth/sign-in', '/sign-in?outcome=refused', `/${'a'.repeat(3000)}`,
  ])('makes the home page of %j', (path) => {
    expect(localPath(path)).toBe('/');
  });

  it('stays on this site for any text at all', () => {
    assert(property(oneof(string(), string().map((text) => `/${text}`), webUrl()), (text) => {
      const site = 'https://crosstie.example';
      expect(new URL(localPath(text), site).origin).toBe(site);
    }), { seed: 4187, numRuns: 2000 });
  });
});

describe('a sealed sign-in', () => {
  const pending: PendingSignIn = { state: 's', nonce: 'n', verifier: 'v', returnTo: '/', invitation: null, expiresAt: 1000 };
  const seal = new PendingSeal('one secret of forty characters, or nearly');

  it('opens again until it expires', () => {
    const sealed = seal.seal(pending);
    expect(seal.open(sealed, 999)).toEqual(pending);
    expect(seal.open(sealed, 1000)).toBeNull();
  });

  it('shows nothing of itself and takes no change', () => {
    const sealed = seal.seal({ ...pending, verifier: 'do-not-show-this' });
    expect(Buffer.from(sealed, 'base64url').toString('latin1')).not.toContain('do-not-show-this');
    for (let at = 0; at < sealed.length - 1; at++) {
      const other = sealed[at] === 'A' ? 'B' : 'A';
      expect(seal.open(sealed.slice(0, at) + other + sealed.slice(at + 1), 0)).toBeNull();
    }
  });

  it('opens under its own secret alone', () => {
    expect(new PendingSeal('another secret').open(seal.seal(pending), 0)).toBeNull();
  });
});

describe('the cookies', () => {
  const needed = { DATABASE_URL: 'postgres://a@b/c', OIDC_ISSUER: 'https://id.example', SESSION_SECRET: 'x'.repeat(32), STORAGE_DIR: '/tmp' };

  it('carry the port on plain http', () => {
    const config = readConfig('server', { ...needed, PORT: '4999' });
    expect(cookieNames(config).session).toBe('crosstie_4999');
    expect(cookieOptions(config)).toMatchObject({ httpOnly: true, sameSite: 'lax', secure: false, path: '/' });
  });

  it('are bound to the host on https', () => {
    const config = readConfig('server', { ...needed, PUBLIC_URL: 'https://crosstie.example/' });
    expect(cookieNames(config).session).toBe('__Host-crosstie_4180');
    expect(cookieOptions(config)).toMatchObject({ secure: true, path: '/' });
  });
});

describe('the local provider', () => {
  it.each(['https://crosstie.example', 'http://10.0.0.7:4180', 'http://127.0.0.1.elsewhere.example', 'http://localhost.elsewhere.example'])('refuses to serve %s', (publicUrl) => {
    const env = { IDP_PORT: '4181', PUBLIC_URL: publicUrl, OIDC_CLIENT_ID: 'crosstie', OIDC_CLIENT_SECRET: 'x'.repeat(20), IDP_STORE_DIR: '/tmp' };
    expect(() => readSettings(env)).toThrow('serves only this machine');
  });
});
