/** The roles of a cluster and a database that crosstie_owner owns. Needs the packages (pg). */
import { ADMIN } from './cluster.mjs';

/**
 * The owner owns the schema and migrates it; the other three own nothing. Backup reads every row, so it
 * alone bypasses row-level security, and may write nothing.
 */
const roles = {
  owner: 'LOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOBYPASSRLS',
  app: 'LOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOBYPASSRLS',
  worker: 'LOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOBYPASSRLS',
  backup: 'LOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE BYPASSRLS',
};
export const ROLE_NAMES = Object.keys(roles);

async function withAdmin(url, work) {
  const { Client } = await import('pg');
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

async function exists(client, sql, name) {
  return (await client.query(sql, [name])).rowCount > 0;
}

async function ensureRole(client, name, password) {
  const role = `crosstie_${name}`;
  const verb = (await exists(client, 'SELECT 1 FROM pg_roles WHERE rolname = $1', role)) ? 'ALTER' : 'CREATE';
  await client.query(`${verb} ROLE ${role} ${roles[name]} PASSWORD ${client.escapeLiteral(password)}`);
}

/** Makes or mends the four roles; `passwords` by short name. Returns nothing. */
export async function ensureRoles(cluster, passwords) {
  await withAdmin(cluster.url(ADMIN, passwords.admin, 'postgres'), async (client) => {
    for (const name of ROLE_NAMES) await ensureRole(client, name, passwords[name]);
    await client.query('GRANT pg_read_all_data TO crosstie_backup');
  });
}

/** Makes the database if it is missing; only the four roles may connect to it. */
export async function ensureDatabase(cluster, passwords, database) {
  await withAdmin(cluster.url(ADMIN, passwords.admin, 'postgres'), async (client) => {
    if (await exists(client, 'SELECT 1 FROM pg_database WHERE datname = $1', database)) return;
    await client.query(`CREATE DATABASE ${client.escapeIdentifier(database)} OWNER crosstie_owner`);
    await client.query(`REVOKE ALL ON DATABASE ${client.escapeIdentifier(database)} FROM PUBLIC`);
    await client.query(`GRANT CONNECT ON DATABASE ${client.escapeIdentifier(database)} TO crosstie_app, crosstie_worker, crosstie_backup`);
  });
}
