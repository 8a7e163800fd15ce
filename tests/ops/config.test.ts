import { describe, expect, it } from 'vitest';
import { ConfigError, readConfig } from '#backend/config';

const server = { DATABASE_URL: 'postgres://a@b/c', OIDC_ISSUER: 'https://id.example/', SESSION_SECRET: 'x'.repeat(32), STORAGE_DIR: '/srv/crosstie' };

describe('the environment', () => {
  it('gives a server everything else by itself', () => {
    const config = readConfig('server', server);
    expect(config).toMatchObject({ port: 4180, host: '127.0.0.1', publicUrl: 'http://127.0.0.1:4180' });
    expect(config.limits).toMatchObject({ snapshotBytes: 5_000_000, captureBytes: 2 ** 31 });
  });

  it('keeps an issuer letter by letter, since it is compared so', () => {
    expect(readConfig('server', server).oidc.issuer).toBe('https://id.example/');
  });

  it('takes an empty variable for one that is not set', () => {
    expect(readConfig('server', { ...server, PORT: '', PUBLIC_URL: ' ' }).port).toBe(4180);
  });

  it.each(Object.keys(server))('names %s and its mend when it is missing', (name) => {
    const env = { ...server, [name]: undefined };
    expect(() => readConfig('server', env)).toThrow(ConfigError);
    expect(() => readConfig('server', env)).toThrow(new RegExp(`${name}: set it to `));
  });

  it.each([
    ['PORT', '0'], ['PORT', 'eighty'], ['DATABASE_URL', 'mysql://a@b/c'], ['PUBLIC_URL', 'ftp://crosstie.example'],
    ['SESSION_SECRET', 'short'], ['MAX_CAPTURE_BYTES', '-1'], ['SMTP_URL', 'mail.example:25'], ['LOG_LEVEL', 'loud'],
  ])('refuses %s=%s by name', (name, value) => {
    expect(() => readConfig('server', { ...server, [name]: value })).toThrow(new RegExp(`${name}: `));
  });

  it('asks of the worker only what the worker needs', () => {
    expect(() => readConfig('worker', { DATABASE_URL: 'postgres://a@b/c', DATABASE_WORKER_URL: 'postgres://a@b/c', STORAGE_DIR: '/srv', SMTP_URL: 'smtp://mail.example' })).not.toThrow();
  });

  it('never repeats a secret in a message', () => {
    expect(() => readConfig('server', { ...server, DATABASE_URL: 'postgres:/crosstie_app:do-not-show@host/db' })).toThrow(expect.not.objectContaining({ message: expect.stringContaining('do-not-show') }));
  });
});
