import type { Database } from './database.js';
import { MIGRATIONS } from './migrations/index.js';

/** The database is not as it must be; the message says what to do. */
export class UnsafeDatabase extends Error {
  override name = 'UnsafeDatabase';
}

/** Refuses a role that could see past the policies, and a table without one. `wanted` is what the mend names. */
export async function refuseUnsafeRole(database: Database, wanted = { role: 'crosstie_app', variable: 'DATABASE_URL' }): Promise<void> {
  const role = await database.row<{ name: string; super: boolean; bypasses: boolean }>(
    'select rolname as name, rolsuper as super, rolbypassrls as bypasses from pg_roles where rolname = current_user');
  if (!role || role.super || role.bypasses) {
    throw new UnsafeDatabase(`The role ${role?.name ?? '?'} is a superuser or bypasses row-level security. Set ${wanted.variable} to the role ${wanted.role}.`);
  }
  const owned = await database.row<{ name: string }>(
    "select c.relname as name from pg_class c join pg_namespace n on n.oid = c.relnamespace where c.relkind in ('r', 'p', 'v', 'm') and n.nspname not like 'pg\\_%' and pg_has_role(current_user, c.relowner, 'member') limit 1");
  if (owned) throw new UnsafeDatabase(`The role ${role.name} owns the table ${owned.name} and so passes its policies. Set ${wanted.variable} to a role that owns nothing, such as ${wanted.role}.`);
  const bare = await database.row<{ name: string }>(
    "select c.relname as name from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname = 'public' and c.relkind in ('r', 'p') and (not c.relrowsecurity or not exists (select 1 from pg_policy p where p.polrelid = c.oid)) limit 1");
  if (bare) throw new UnsafeDatabase(`The table ${bare.name} has no row-level policy. Restore it by migrating, before anyone connects.`);
}

/** Refuses a schema that is older or newer than this version of Crosstie. */
export async function refuseOtherVersion(database: Database): Promise<void> {
  let applied: { name: string }[] = [];
  try {
    applied = await database.rows<{ name: string }>('select name from migrations.applied order by name');
  } catch {
    throw new UnsafeDatabase('The database has no Crosstie schema. Set DATABASE_OWNER_URL and start once more, so that it can be migrated.');
  }
  const expected = MIGRATIONS.at(-1)?.name;
  if (applied.length !== MIGRATIONS.length || applied.at(-1)?.name !== expected) {
    throw new UnsafeDatabase(`The database's schema is at ${applied.at(-1)?.name ?? 'nothing'}, this version needs ${expected}. Set DATABASE_OWNER_URL and start once more, so that it can be migrated.`);
  }
}
