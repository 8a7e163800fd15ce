import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { Agent, request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { Client } from 'pg';
import { createTestDatabase } from '../support/database.js';
import { freePort } from '../support/listen.js';
import { COUNTS_BY_HAND, PAGE_BY_HAND } from './list-sql.js';
import { plantRegister, type Reader } from './plant-register.js';
import type { Report } from './report.js';

const ROUNDS = 5;
const CONNECTIONS = 32;
const RATE_MS = 3000;
const SINGLE = 40;
const LIST = '/api/issues?page=1&size=50';
const COUNTS = '/api/issues/counts';

export default async function bench(report: Report): Promise<void> {
  const database = await createTestDatabase();
  const admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
  const planted = await plantRegister(admin);
  const server = await startServer(database.appUrl);
  try {
    await compare(report, { server, admin, reader: planted.lab, name: 'lab' });
    await compare(report, { server, admin, reader: planted.vendor, name: 'vendor' });
  } finally {
    await server.stop();
    await admin.end();
    await database.drop();
  }
}

interface Server { readonly port: number; stop(): Promise<void> }

async function startServer(appUrl: string): Promise<Server> {
  const port = await freePort();
  const folder = mkdtempSync(join(tmpdir(), 'crosstie-bench-'));
  const child = spawn(process.execPath, ['--conditions', 'source', '--import', 'tsx', fileURLToPath(new URL('list-server.ts', import.meta.url))], {
    stdio: ['pipe', 'pipe', 'inherit'],
    env: { ...process.env, NODE_ENV: 'production', DATABASE_URL: appUrl, OIDC_ISSUER: 'http://127.0.0.1:9', SESSION_SECRET: 's'.repeat(40), STORAGE_DIR: folder, PORT: String(port), LOG_LEVEL: 'silent' },
  });
  await once(createInterface({ input: child.stdout }), 'line');
  return {
    port,
    async stop() {
      child.stdin.end();
      await once(child, 'exit');
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

interface Subject { readonly server: Server; readonly admin: Client; readonly reader: Reader; readonly name: string }

/** Interleaved rounds, so that whatever else the machine does falls on both alike. */
async function compare(report: Report, { server, admin, reader, name }: Subject): Promise<void> {
  const agent = new Agent({ keepAlive: true, maxSockets: CONNECTIONS });
  const ask = (path: string) => get(agent, { port: server.port, path, cookie: `crosstie_${server.port}=${reader.cookie}` });
  const page = JSON.parse(await ask(LIST)) as Page;
  refuseDifference(page, await pageByHand(admin, reader));
  const counted = JSON.parse(await ask(COUNTS)) as Counts;
  const countedByHand = await countsByHand(admin, reader);
  if (counted.matching !== countedByHand.matching || counted.all !== countedByHand.all) throw new Error(`the counts disagree: ${counted.matching} of ${counted.all} and ${countedByHand.matching} of ${countedByHand.all}`);
  await post(agent, server.port, JSON.stringify(page));
  const [times, countTimes, rates]: [number[], number[], number[]] = [[], [], []];
  for (let round = 0; round <= ROUNDS; round++) {
    const endpointMs = await medianOf(() => ask(LIST));
    const statementMs = await medianOf(() => pageByHand(admin, reader));
    const countsMs = await medianOf(() => ask(COUNTS));
    const countStatementMs = await medianOf(() => countsByHand(admin, reader));
    const list = await rate(() => ask(LIST));
    const constant = await rate(() => ask('/constant'));
    // The first round warms up.
    if (round === 0) continue;
    times.push(endpointMs / statementMs);
    countTimes.push(countsMs / countStatementMs);
    rates.push(list / constant);
  }
  report(`list of 20,000 issues (${name}): endpoint time / best hand-written SQL`, times, { lowerIsBetter: true });
  report(`counts of 20,000 issues (${name}): endpoint time / best hand-written SQL`, countTimes, { lowerIsBetter: true });
  report(`list of 20,000 issues (${name}): rate at ${CONNECTIONS} connections / constant 50-row reply`, rates, { goal: 0.6 });
  agent.destroy();
}

interface Page { readonly items: readonly { readonly number: string }[]; readonly more: boolean }
interface Counts { readonly matching: number; readonly all: number }

/** The same rows in the same order, or what is measured is not the same work. */
function refuseDifference(page: Page, byHand: readonly { number: string }[]): void {
  const [theirs, ours] = [page.items.map(({ number }) => number), byHand.slice(0, 50).map(({ number }) => number)];
  if (theirs.length !== 50 || !page.more || theirs.join() !== ours.join()) throw new Error(`the endpoint and the statement disagree: ${theirs.join()} and ${ours.join()}`);
}

async function pageByHand(admin: Client, reader: Reader): Promise<{ number: string }[]> {
  const { rows } = await admin.query({ name: 'page-by-hand', text: PAGE_BY_HAND, values: [reader.partyIds, reader.personId] });
  return rows;
}

async function countsByHand(admin: Client, reader: Reader): Promise<Counts> {
  const { rows } = await admin.query({ name: 'counts-by-hand', text: COUNTS_BY_HAND, values: [reader.partyIds] });
  return rows[0];
}

async function medianOf(work: () => Promise<unknown>): Promise<number> {
  const times: number[] = [];
  for (let n = 0; n < SINGLE; n++) {
    const began = performance.now();
    await work();
    times.push(performance.now() - began);
  }
  return times.toSorted((a, b) => a - b)[SINGLE / 2];
}

/** Answers per second while so many connections ask one after the other. */
async function rate(work: () => Promise<unknown>): Promise<number> {
  let answers = 0;
  const began = performance.now();
  await Promise.all(Array.from({ length: CONNECTIONS }, async () => {
    while (performance.now() - began < RATE_MS) {
      await work();
      answers++;
    }
  }));
  return answers / (performance.now() - began);
}

function get(agent: Agent, { port, path, cookie }: { port: number; path: string; cookie: string }): Promise<string> {
  return new Promise((resolve, reject) => {
    request({ agent, host: '127.0.0.1', port, path, headers: { cookie } }, (response) => {
      const parts: Buffer[] = [];
      response.on('data', (part: Buffer) => parts.push(part)).on('error', reject).on('end', () => {
        if (response.statusCode === 200) resolve(Buffer.concat(parts).toString());
        else reject(new Error(`${path} answered ${response.statusCode}: ${Buffer.concat(parts).toString().slice(0, 200)}`));
      });
    }).on('error', reject).end();
  });
}

async function post(agent: Agent, port: number, body: string): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    request({ agent, host: '127.0.0.1', port, path: '/constant', method: 'POST', headers: { 'content-type': 'application/json' } }, (response) => {
      response.resume().on('end', () => resolve());
    }).on('error', reject).end(body);
  });
}
