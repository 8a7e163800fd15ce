import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import type { Server } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import express from 'express';
import { Pool } from 'pg';
import { findCaller } from '#backend/auth/find-caller';
import { authRouter } from '#backend/auth/routes';
import { sqlSessionStore } from '#backend/auth/session-store';
import { readConfig, type Config } from '#backend/config';
import { callerOf } from '#backend/http/endpoint';
import { renderErrors } from '#backend/http/problems';
import { createProviderApp } from '#dev-idp/server';
import { createTestDatabase, type TestDatabase } from '../support/database.js';
import { close, freePort, listen } from '../support/listen.js';

const CLIENT_SECRET = 'a-secret-of-the-tests-alone';

/** The real provider, the real sign-in, the real database; nothing else of the product. */
export interface Stage {
  url: string;
  issuer: string;
  database: TestDatabase;
  owner: Pool;
  config: Config;
  restartProvider(): Promise<void>;
  stop(): Promise<void>;
}

async function startProvider(issuerPort: number, publicUrl: string, storeDir: string): Promise<Server> {
  const app = createProviderApp({
    port: issuerPort, issuer: `http://127.0.0.1:${issuerPort}`, publicUrl,
    client: { id: 'crosstie', secret: CLIENT_SECRET }, storeDir, password: undefined,
  });
  return listen(app, issuerPort);
}

function productApp(config: Config, pool: Pool) {
  const sessions = sqlSessionStore((sql, params) => pool.query(sql, [...params]));
  const app = express();
  app.use(authRouter({ config, sessions, log: { warn: () => undefined } }));
  app.use(findCaller(config, sessions));
  app.get('/api/whoever', (request, response) => { response.json({ name: callerOf(request).name }); });
  app.get('/{*any}', (_request, response) => { response.send('a page'); });
  app.use(renderErrors(() => undefined));
  return app;
}

export async function openStage(env: Record<string, string> = {}): Promise<Stage> {
  const [port, issuerPort] = [await freePort(), await freePort()];
  const storeDir = mkdtempSync(join(tmpdir(), 'crosstie-idp-'));
  const database = await createTestDatabase();
  const issuer = `http://127.0.0.1:${issuerPort}`;
  const config = readConfig('server', {
    PORT: String(port), DATABASE_URL: database.appUrl, OIDC_ISSUER: issuer, OIDC_CLIENT_SECRET: CLIENT_SECRET,
    SESSION_SECRET: 'x'.repeat(40), STORAGE_DIR: storeDir, SIGN_INS_PER_MINUTE: '1000', ...env,
  });
  const [pool, owner] = [new Pool({ connectionString: database.appUrl }), new Pool({ connectionString: database.ownerUrl })];
  let provider = await startProvider(issuerPort, config.publicUrl, storeDir);
  const server = await listen(productApp(config, pool), port);
  return {
    url: config.publicUrl, issuer, database, owner, config,
    async restartProvider() {
      await close(provider);
      provider = await startProvider(issuerPort, config.publicUrl, storeDir);
    },
    async stop() {
      await Promise.all([close(server), close(provider)]);
      await Promise.all([pool.end(), owner.end()]);
      await database.drop();
      rmSync(storeDir, { recursive: true, force: true });
    },
  };
}

/** A programme with one party that trusts `issuer`; returns both ids. */
export async function makeParty(owner: Pool, issuer: string, code: string): Promise<{ programmeId: string; partyId: string }> {
  const programme = await owner.query('insert into programmes (code, name) values ($1, $1) returning id', [code]);
  const programmeId = programme.rows[0].id as string;
  const party = await owner.query(
    "insert into parties (programme_id, name, short_name, parts, issuer) values ($1, 'Tarnbeck Radio', 'Tarnbeck', '{radio unit}', $2) returning id", [programmeId, issuer]);
  return { programmeId, partyId: party.rows[0].id as string };
}

interface Invited { programmeId: string; partyId: string; email: string; token: string; expires?: string }

export async function invite(owner: Pool, { programmeId, partyId, email, token, expires = '1 day' }: Invited): Promise<void> {
  const hash = createHash('sha256').update(token).digest();
  await owner.query(
    `insert into invitations (programme_id, party_id, email, role, token_hash, invited_by, expires_at)
     values ($1, $2, $3, 'vendor-engineer', $4, 'Tobin Aschero', now() + $5::interval)`, [programmeId, partyId, email, hash, expires]);
}
