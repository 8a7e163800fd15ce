import { Client } from 'pg';
import { Umzug, type UmzugStorage } from 'umzug';
import { MIGRATIONS } from './migrations/index.js';

/** Applied migrations, in a table of the owner's. */
class Applied implements UmzugStorage {
  constructor(private readonly client: Client) {}

  async prepare(): Promise<void> {
    await this.client.query('create schema if not exists migrations; create table if not exists migrations.applied (name text primary key, at timestamptz not null default now())');
  }
  async logMigration({ name }: { name: string }): Promise<void> {
    await this.client.query('insert into migrations.applied (name) values ($1)', [name]);
  }
  async unlogMigration({ name }: { name: string }): Promise<void> {
    await this.client.query('delete from migrations.applied where name = $1', [name]);
  }
  async executed(): Promise<string[]> {
    const { rows } = await this.client.query<{ name: string }>('select name from migrations.applied order by name');
    return rows.map((row) => row.name);
  }
}

/** Brings the schema up to date as its owner; answers the names that were applied now. */
export async function migrate(ownerUrl: string): Promise<string[]> {
  const client = new Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    // Two starts at once must not migrate at once.
    await client.query("select pg_advisory_lock(hashtext('crosstie.migrate'))");
    const storage = new Applied(client);
    await storage.prepare();
    const umzug = new Umzug({
      migrations: MIGRATIONS.map(({ name, up }) => ({
        name,
        up: async () => {
          await client.query('begin');
          try {
            await client.query(up);
            await client.query('commit');
          } catch (error) {
            await client.query('rollback');
            throw error;
          }
        },
      })),
      storage,
      logger: undefined,
    });
    const applied = await umzug.up();
    await client.query('grant usage on schema migrations to crosstie_app, crosstie_worker; grant select on migrations.applied to crosstie_app, crosstie_worker');
    return applied.map(({ name }) => name);
  } finally {
    await client.end();
  }
}
