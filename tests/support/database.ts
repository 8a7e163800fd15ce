import { randomBytes } from 'node:crypto';
import { Client } from 'pg';

/** A database of its own for one test file, cloned from the migrated template. */
export interface TestDatabase {
  name: string;
  ownerUrl: string;
  appUrl: string;
  workerUrl: string;
  backupUrl: string;
  /** The cluster's superuser: for planting and inspecting rows past the policies. */
  adminUrl: string;
  drop(): Promise<void>;
}

const TEMPLATE = 'crosstie_template';

function clusterUrl(role: string): string {
  const value = process.env[`CROSSTIE_TEST_${role}_URL`];
  if (!value) throw new Error('No test cluster: run this file through `npm test -- FILE`, which starts one.');
  return value;
}

async function asAdmin(sql: string): Promise<void> {
  const client = new Client({ connectionString: `${clusterUrl('ADMIN')}postgres` });
  await client.connect();
  try {
    await client.query(sql);
  } finally {
    await client.end();
  }
}

function describeDatabase(name: string): TestDatabase {
  const url = (role: string) => `${clusterUrl(role)}${name}`;
  return {
    name,
    ownerUrl: url('OWNER'),
    appUrl: url('APP'),
    workerUrl: url('WORKER'),
    backupUrl: url('BACKUP'),
    adminUrl: url('ADMIN'),
    drop: () => asAdmin(`DROP DATABASE IF EXISTS ${name} WITH (FORCE)`),
  };
}

async function create(template: string): Promise<TestDatabase> {
  const name = `test_${randomBytes(6).toString('hex')}`;
  await asAdmin(`CREATE DATABASE ${name} TEMPLATE ${template} OWNER crosstie_owner`);
  await asAdmin(`REVOKE ALL ON DATABASE ${name} FROM PUBLIC`);
  await asAdmin(`GRANT CONNECT ON DATABASE ${name} TO crosstie_app, crosstie_worker, crosstie_backup`);
  return describeDatabase(name);
}

/** Migrated and empty. `drop` it when the file is done; the cluster goes with the run in any case. */
export function createTestDatabase(): Promise<TestDatabase> {
  return create(TEMPLATE);
}

/** Without schema: for the tests of migrations and of restoring. */
export function createBareDatabase(): Promise<TestDatabase> {
  return create('template0');
}
