import { createHash, randomBytes } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Express } from 'express';
import { Client } from 'pg';
import { pino } from 'pino';
import request, { type Test } from 'supertest';
import { createApp } from '#backend/app';
import { readConfig, type Config } from '#backend/config';
import { Database } from '#backend/db/database';
import { Storage } from '#backend/files/storage';
import type { Services } from '#backend/http/services';
import { LiveHub } from '#backend/live/live-hub';
import { createTestDatabase, type TestDatabase } from './database.js';

export const ISSUER = 'http://127.0.0.1:4999';
/** Everything invented: the parties and people of the demo's scenario, by short names. */
const PARTIES = { lab: ['Harrowmere Integration Lab', ['test lab']], radio: ['Tarnbeck Radio', ['radio unit']], network: ['Ostrel Networks', ['distributed unit']], device: ['Vimmery Devices', ['terminal']], wifi: ['Pellfold Wireless', ['access point']] } as const;
const PEOPLE = {
  mara: ['Mara Oyelaran', 'lab', 'integration-engineer'], edda: ['Edda Quillfeather', 'lab', 'programme-manager'], tobin: ['Tobin Aschero', 'lab', 'programme-administrator'],
  osk: ['Osk Brandreth', 'lab', 'observer'], ines: ['Ines Torvald', 'radio', 'vendor-engineer'], jory: ['Jory Haldane', 'network', 'vendor-engineer'],
  rao: ['Rao Lindqvist', 'device', 'vendor-engineer'], petra: ['Petra Wynnlow', 'wifi', 'vendor-engineer'],
} as const;
export type PartyKey = keyof typeof PARTIES;
export type PersonKey = keyof typeof PEOPLE;
export const EVERYONE = Object.keys(PEOPLE) as PersonKey[];

export interface World {
  readonly database: TestDatabase;
  readonly services: Services;
  readonly storage: Storage;
  readonly app: Express;
  /** Past every policy: for planting and inspecting. */
  readonly admin: Client;
  readonly programmeId: string;
  readonly parties: Record<PartyKey, string>;
  readonly people: Record<PersonKey, string>;
  readonly units: Record<'radio' | 'network' | 'device' | 'wifi' | 'wifiFar', string>;
  readonly builds: Record<'radio1' | 'radio2' | 'network1' | 'device1' | 'device2' | 'wifi1', string>;
  readonly links: Record<'air' | 'fronthaul' | 'wifi', string>;
  as(person: PersonKey): Requests;
  anonymous(): Requests;
  cookieOf(person: PersonKey): string;
  close(): Promise<void>;
}
type Method = 'get' | 'post' | 'patch' | 'put' | 'delete';
export type Requests = Record<Method, (path: string) => Test>;

/** An application on a database of its own, with a programme, parties, people, links and sessions. */
export async function createWorld(env: Record<string, string> = {}, live: { heartbeatMs?: number } = {}): Promise<World> {
  const database = await createTestDatabase();
  const folder = mkdtempSync(join(tmpdir(), 'crosstie-world-'));
  const config: Config = readConfig('server', {
    DATABASE_URL: database.appUrl, OIDC_ISSUER: ISSUER, SESSION_SECRET: 's'.repeat(40), STORAGE_DIR: folder, PORT: '4180', LOG_LEVEL: process.env.CROSSTIE_TEST_LOG ?? 'silent', MIN_FREE_BYTES: '0', ...env,
  });
  const log = pino({ level: config.logLevel });
  const services: Services = { config, database: new Database(config.database.app, { pool: 12 }), log, now: () => new Date() };
  const storage = new Storage(config.storageDir);
  await storage.prepare();
  const hub = new LiveHub(config.database.app, log);
  await hub.start();
  const app = createApp({ services, storage, hub, ...live });
  const admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
  const tenants = await plantTenants(admin);
  const cookies = await plantSessions(admin, tenants.people);
  const requests = (cookie?: string): Requests => Object.fromEntries((['get', 'post', 'patch', 'put', 'delete'] as Method[]).map((method) => [method, (path: string) => {
    const made = request(app)[method](path).set('x-crosstie', '1');
    return cookie ? made.set('cookie', `crosstie_${config.port}=${cookie}`) : made;
  }])) as Requests;
  return {
    database, services, storage, app, admin, ...tenants,
    as: (person) => requests(cookies[person]), anonymous: () => requests(), cookieOf: (person) => `crosstie_${config.port}=${cookies[person]}`,
    async close() {
      await hub.stop();
      await services.database.close();
      await admin.end();
      await database.drop();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

type Insert = (table: string, row: Record<string, unknown>) => Promise<string>;

function inserter(admin: Client): Insert {
  return async (table, row) => {
    const names = Object.keys(row);
    const { rows } = await admin.query<{ id: string }>(`insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')}) returning id`, Object.values(row));
    return rows[0].id;
  };
}

async function plantTenants(admin: Client) {
  const insert = inserter(admin);
  const programmeId = await insert('programmes', { code: 'SKH', name: 'Skerry Harbour private network' });
  const parties = {} as World['parties'];
  for (const [key, [name, parts]] of Object.entries(PARTIES)) parties[key as PartyKey] = await insert('parties', { programme_id: programmeId, name, short_name: name.split(' ')[0], parts, issuer: ISSUER });
  const people = {} as World['people'];
  for (const [key, [name, party, role]] of Object.entries(PEOPLE)) {
    people[key as PersonKey] = await insert('people', { issuer: ISSUER, subject: key, name, email: `${key}@${party}.example` });
    await insert('memberships', { programme_id: programmeId, party_id: parties[party], person_id: people[key as PersonKey], role });
  }
  const unit = (party: PartyKey, name: string, part: string) => insert('units', { programme_id: programmeId, party_id: parties[party], name, part });
  const units = { radio: await unit('radio', 'TR-8', 'radio unit'), network: await unit('network', 'ON-40', 'distributed unit'), device: await unit('device', 'V-Port', 'terminal'), wifi: await unit('wifi', 'PW-5 near', 'access point'), wifiFar: await unit('wifi', 'PW-5 far', 'access point') };
  const build = (unitId: string, label: string) => insert('builds', { programme_id: programmeId, unit_id: unitId, label });
  const builds = { radio1: await build(units.radio, '4.2.1'), radio2: await build(units.radio, '4.2.2'), network1: await build(units.network, '9.0'), device1: await build(units.device, '22.3.0'), device2: await build(units.device, '22.3.1'), wifi1: await build(units.wifi, '5.1') };
  const link = (name: string, on: string, [unitA, partyA]: [string, PartyKey], [unitB, partyB]: [string, PartyKey]) => insert('links', {
    programme_id: programmeId, name, interface: on, unit_a_id: unitA, unit_b_id: unitB, party_a_id: parties[partyA], party_b_id: parties[partyB],
    party_ids: [...new Set([parties[partyA], parties[partyB], parties.lab])],
  });
  const links = {
    air: await link('Crane air', 'air', [units.radio, 'radio'], [units.device, 'device']),
    fronthaul: await link('Mast fronthaul', 'fronthaul', [units.network, 'network'], [units.radio, 'radio']),
    wifi: await link('Quay backhaul', 'wifi', [units.wifi, 'wifi'], [units.wifiFar, 'wifi']),
  };
  return { programmeId, parties, people, units, builds, links };
}

async function plantSessions(admin: Client, people: World['people']): Promise<Record<PersonKey, string>> {
  const cookies = {} as Record<PersonKey, string>;
  for (const key of EVERYONE) {
    cookies[key] = randomBytes(32).toString('base64url');
    await admin.query("insert into sessions (token_hash, person_id, idle, expires_at, absolute_expires_at) values ($1, $2, interval '8 hours', now() + interval '8 hours', now() + interval '7 days')",
      [createHash('sha256').update(cookies[key]).digest(), people[key]]);
  }
  return cookies;
}

/** A valid issue to file on the air link; change what the test is about. */
export function issueOn(world: World, change: Record<string, unknown> = {}): Record<string, unknown> {
  return {
    linkId: world.links.air, title: 'Terminal never gets SIB1', description: '', severity: 'critical', buildAId: world.builds.radio1, buildBId: world.builds.device1,
    transmitter: 'a', lastRung: { downlink: 'MIB', uplink: null }, signalPath: { path: 'cabled', attenuationDb: 40, levelDbm: -50, clockSource: 'GPS', lateCounters: null },
    baseline: '', fileKey: crypto.randomUUID(), ...change,
  };
}
