import { Client } from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { MIGRATIONS } from '#backend/db/migrations/index';
import { migrate } from '#backend/db/migrate';
import { createBareDatabase, type TestDatabase } from '../support/database.js';

let database: TestDatabase;
let admin: Client;

beforeAll(async () => {
  database = await createBareDatabase();
  await migrate(database.ownerUrl);
  admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
});
afterAll(async () => {
  await admin.end();
  await database.drop();
});

describe('migrations', () => {
  it('are applied once: a second run finds nothing to do', async () => {
    expect(await migrate(database.ownerUrl)).toEqual([]);
    const { rows } = await admin.query('select name from migrations.applied order by name');
    expect(rows.map((row) => row.name)).toEqual(MIGRATIONS.map(({ name }) => name));
  });

  it('leave no table of the product without row-level security and a policy', async () => {
    const { rows } = await admin.query<{ relname: string }>(`
      select c.relname from pg_class c join pg_namespace n on n.oid = c.relnamespace
      where n.nspname = 'public' and c.relkind in ('r', 'p')
        and (not c.relrowsecurity or not exists (select 1 from pg_policy p where p.polrelid = c.oid))`);
    expect(rows).toEqual([]);
  });

  it('give the application no table, no bypass and no way into the queue', async () => {
    const { rows: [role] } = await admin.query('select rolsuper, rolbypassrls from pg_roles where rolname = $1', ['crosstie_app']);
    expect(role).toEqual({ rolsuper: false, rolbypassrls: false });
    const { rows: owned } = await admin.query("select 1 from pg_class c join pg_roles r on r.oid = c.relowner where r.rolname in ('crosstie_app', 'crosstie_worker')");
    expect(owned).toEqual([]);
    const { rows: [queue] } = await admin.query("select has_schema_privilege('crosstie_app', 'pgboss', 'usage') as queue, has_schema_privilege('crosstie_app', 'public', 'create') as creates");
    expect(queue).toEqual({ queue: false, creates: false });
  });

  it('index every foreign key that a list joins on, or leave it to a primary key', async () => {
    const { rows } = await admin.query<{ relname: string }>(`
      select c.relname from pg_class c join pg_namespace n on n.oid = c.relnamespace
      where n.nspname = 'public' and c.relkind = 'r' and not exists (select 1 from pg_index i where i.indrelid = c.oid)`);
    expect(rows).toEqual([]);
  });

  it('fix the search path of every function that runs as owner', async () => {
    const { rows } = await admin.query(`
      select p.proname from pg_proc p join pg_namespace n on n.oid = p.pronamespace
      where n.nspname in ('access', 'auth') and p.prosecdef and (p.proconfig is null or not exists (select 1 from unnest(p.proconfig) s where s like 'search_path=%'))`);
    expect(rows).toEqual([]);
  });
});

describe('without an acting person', () => {
  it('the application sees no tenant row at all', async () => {
    const app = new Client({ connectionString: database.appUrl });
    await app.connect();
    try {
      await admin.query("insert into programmes (code, name) values ('ZZZ', 'planted') on conflict do nothing");
      const { rows: tables } = await admin.query<{ name: string }>("select c.relname as name from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname = 'public' and c.relkind = 'r'");
      for (const { name } of tables) {
        const readable = await admin.query('select has_any_column_privilege($1, $2, $3) as may', ['crosstie_app', `public.${name}`, 'select']);
        if (!readable.rows[0].may) continue;
        const { rows } = await app.query(`select 1 from public.${name}`);
        expect(rows, name).toEqual([]);
      }
    } finally {
      await app.end();
    }
  });
});
