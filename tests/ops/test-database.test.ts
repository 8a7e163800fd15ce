import { Client } from 'pg';
import { afterAll, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.js';

const made: TestDatabase[] = [];

async function ask(url: string, sql: string): Promise<unknown> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    return Object.values((await client.query(sql)).rows[0] ?? {})[0];
  } finally {
    await client.end();
  }
}

async function make(): Promise<TestDatabase> {
  const database = await createTestDatabase();
  made.push(database);
  return database;
}

afterAll(() => Promise.all(made.map((database) => database.drop())));

describe('the test database', () => {
  it('is one of its own for each caller', async () => {
    const [one, two] = [await make(), await make()];
    await ask(one.ownerUrl, 'CREATE TABLE only_here (a int)');
    expect(await ask(two.ownerUrl, "SELECT to_regclass('only_here')")).toBeNull();
  });

  it.each(['app', 'worker'] as const)('is reached by %s as a role that neither owns nor bypasses', async (role) => {
    const database = await make();
    const url = role === 'app' ? database.appUrl : database.workerUrl;
    const powers = 'SELECT (rolsuper OR rolbypassrls OR rolcreaterole OR rolcreatedb) FROM pg_roles WHERE rolname = current_user';
    expect(await ask(url, powers)).toBe(false);
    expect(await ask(url, 'SELECT count(*)::int FROM pg_class WHERE relowner = current_user::regrole')).toBe(0);
  });

  it('lets only backup past the policies, and lets it write nothing', async () => {
    const database = await make();
    expect(await ask(database.backupUrl, 'SELECT rolbypassrls FROM pg_roles WHERE rolname = current_user')).toBe(true);
    await expect(ask(database.backupUrl, 'CREATE TABLE public.mine (a int)')).rejects.toThrow('permission denied');
  });
});
