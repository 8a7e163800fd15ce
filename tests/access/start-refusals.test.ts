import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { Client } from 'pg';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { Database } from '#backend/db/database';
import { MIGRATIONS } from '#backend/db/migrations/index';
import { refuseOtherVersion, refuseUnsafeRole, UnsafeDatabase } from '#backend/db/safe-role';
import { createBareDatabase, createTestDatabase, type TestDatabase } from '../support/database.js';

const ROOT = fileURLToPath(new URL('../..', import.meta.url));
const ROLE = `crosstie_probe_${process.pid}`;
let database: TestDatabase;
let admin: Client;
const opened: Database[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
  admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
  await admin.query(`create role ${ROLE} login password 'probe'`);
  await admin.query(`grant connect on database ${database.name} to ${ROLE}`);
});
afterEach(async () => {
  for (const one of opened.splice(0)) await one.close();
});
afterAll(async () => {
  await admin.end();
  await database.drop();
  // Roles belong to the cluster: this one must not outlive the test.
  const cluster = new Client({ connectionString: database.adminUrl.replace(database.name, 'postgres') });
  await cluster.connect();
  await cluster.query(`drop role ${ROLE}`);
  await cluster.end();
});

function connect(url: string): Database {
  const one = new Database(url, { pool: 1 });
  opened.push(one);
  return one;
}
const asProbe = () => connect(`${database.adminUrl.replace(/\/\/[^@]+@/, `//${ROLE}:probe@`)}`);

describe('the server refuses to start', () => {
  it('as a superuser', async () => {
    await expect(refuseUnsafeRole(connect(database.adminUrl))).rejects.toThrow(/crosstie_admin is a superuser or bypasses.*DATABASE_URL to the role crosstie_app/);
  });

  it('as a role that bypasses the policies', async () => {
    await admin.query(`alter role ${ROLE} bypassrls`);
    await expect(refuseUnsafeRole(asProbe())).rejects.toThrow(/bypasses row-level security/);
    await admin.query(`alter role ${ROLE} nobypassrls`);
    await expect(refuseUnsafeRole(asProbe())).resolves.toBeUndefined();
  });

  it('as the owner of a table, or as a member of the owner', async () => {
    await expect(refuseUnsafeRole(connect(database.ownerUrl))).rejects.toThrow(/owns the table/);
    await admin.query(`grant crosstie_owner to ${ROLE}`);
    await expect(refuseUnsafeRole(asProbe())).rejects.toThrow(/owns the table/);
    await admin.query(`revoke crosstie_owner from ${ROLE}`);
  });

  it.each([
    ['without row-level security', 'create table stray (id int)', 'drop table stray'],
    ['with row-level security and no policy', 'create table stray (id int); alter table stray enable row level security', 'drop table stray'],
    ['of its own whose policies were switched off', 'alter table entries disable row level security', 'alter table entries enable row level security'],
  ])('where a table stands %s', async (_what, make, undo) => {
    await admin.query(make);
    await expect(refuseUnsafeRole(connect(database.appUrl))).rejects.toThrow(/The table (stray|entries) has no row-level policy/);
    await admin.query(undo);
    await expect(refuseUnsafeRole(connect(database.appUrl))).resolves.toBeUndefined();
  });

  it('on a schema that is older, newer, or not there', async () => {
    const last = MIGRATIONS.at(-1)!.name;
    await admin.query('delete from migrations.applied where name = $1', [last]);
    await expect(refuseOtherVersion(connect(database.appUrl))).rejects.toThrow(new RegExp(`this version needs ${last}`));
    await admin.query("insert into migrations.applied (name) values ($1), ('9999-from-the-future')", [last]);
    await expect(refuseOtherVersion(connect(database.appUrl))).rejects.toThrow(/is at 9999-from-the-future/);
    await admin.query("delete from migrations.applied where name = '9999-from-the-future'");
    await expect(refuseOtherVersion(connect(database.appUrl))).resolves.toBeUndefined();
    const bare = await createBareDatabase();
    const one = connect(bare.appUrl);
    await expect(refuseOtherVersion(one)).rejects.toThrow(UnsafeDatabase);
    await one.close();
    opened.length = 0;
    await bare.drop();
  });

  it.each(['main', 'worker'])('in one plain line, and the process ends: %s', async (part) => {
    const child = spawn(process.execPath, ['--conditions', 'source', '--import', 'tsx', `backend/src/${part}.ts`], {
      cwd: ROOT, stdio: ['ignore', 'pipe', 'pipe'],
      env: { ...process.env, DATABASE_URL: database.adminUrl, DATABASE_WORKER_URL: database.workerUrl, OIDC_ISSUER: 'http://127.0.0.1:9', SESSION_SECRET: 's'.repeat(40), STORAGE_DIR: join(tmpdir(), 'crosstie-nowhere'), SMTP_URL: 'smtp://127.0.0.1:9', PORT: '1' },
    });
    let said = '';
    child.stderr.on('data', (text: Buffer) => { said += text.toString(); });
    const [code] = await once(child, 'exit');
    expect(code).toBe(1);
    expect(said.trim().split('\n')).toHaveLength(1);
    expect(said).toContain('is a superuser or bypasses row-level security');
  });

  it('with a worker whose own role sees past the policies', async () => {
    await expect(refuseUnsafeRole(connect(database.adminUrl), { role: 'crosstie_worker', variable: 'DATABASE_WORKER_URL' })).rejects.toThrow(/Set DATABASE_WORKER_URL to the role crosstie_worker/);
    await expect(refuseUnsafeRole(connect(database.workerUrl))).resolves.toBeUndefined();
  });
});
