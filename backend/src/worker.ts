import pg from 'pg';
import PgBoss from 'pg-boss';
import { pino, type Logger } from 'pino';
import { ConfigError, readConfig, type Config } from './config.js';
import { Database } from './db/database.js';
import { refuseOtherVersion, refuseUnsafeRole, UnsafeDatabase } from './db/safe-role.js';
import { requeueAbandoned } from './decodes/abandoned.js';
import { releaseAll, runDecode } from './decodes/decode-job.js';
import type { Claimed } from './decodes/decode-records.js';
import { Storage } from './files/storage.js';
import { dropForgottenDrafts, removeDiscarded } from './files/sweep.js';
import { WORKER_LOCK } from './http/health.js';
import { sendInvitations } from './mail/invitations.js';
import { sendDue, smtpTransport } from './mail/outbox.js';
import { endWaivers } from './moves/end-waivers.js';

/** Work that repeats: one at a time, never two of the same at once, errors reported and tried again. */
function repeat(everyMs: number, log: Logger, work: () => Promise<unknown>): () => void {
  let stopped = false;
  let timer: NodeJS.Timeout;
  const turn = async () => {
    await work().catch((error: unknown) => log.error({ error }, 'a repeated task failed'));
    if (!stopped) timer = setTimeout(() => void turn(), everyMs);
  };
  void turn();
  return () => {
    stopped = true;
    clearTimeout(timer);
  };
}

/** Held for as long as the worker runs: the health check looks for it. */
async function showPulse(config: Config): Promise<pg.Client> {
  const client = new pg.Client({ connectionString: config.database.worker, keepAlive: true });
  await client.connect();
  await client.query('select pg_advisory_lock_shared($1, $2)', [...WORKER_LOCK]);
  client.on('error', () => process.exit(1));
  return client;
}

/** The worker's own role may do more than the application's, and no more than its policies say. */
async function refuseUnsafeWorker(config: Config): Promise<void> {
  const own = new Database(config.database.worker, { pool: 1 });
  await refuseUnsafeRole(own, { role: 'crosstie_worker', variable: 'DATABASE_WORKER_URL' }).finally(() => own.close());
}

async function main(): Promise<void> {
  const config = readConfig('worker');
  const log = pino({ level: config.logLevel });
  const pool = new pg.Pool({ connectionString: config.database.worker, max: 6 });
  pool.on('error', (error) => log.warn({ error: error.message }, 'an idle connection broke'));
  const database = new Database(config.database.app, { pool: 3 });
  await refuseUnsafeRole(database);
  await refuseOtherVersion(database);
  await refuseUnsafeWorker(config);
  const storage = new Storage(config.storageDir);
  const boss = new PgBoss({ connectionString: config.database.worker, schema: 'pgboss', migrate: false, schedule: false, max: 4 });
  boss.on('error', (error) => log.warn({ error: error.message }, 'the queue reported an error'));
  await boss.start();
  const running = new Set<Claimed>();
  for (let thread = 0; thread < config.decodeThreads; thread++) {
    await boss.work<{ decodeId: string }>('decode', { batchSize: 1, pollingIntervalSeconds: 0.5 }, async ([job]) => runDecode({ pool, storage, log, running }, job.data.decodeId));
  }
  const transport = smtpTransport(config.mail.smtpUrl);
  const mail = { pool, database, transport, from: config.mail.from, publicUrl: config.publicUrl, log };
  const stops = [
    repeat(5000, log, () => requeueAbandoned(pool)),
    repeat(1500, log, () => sendDue(mail)),
    repeat(1500, log, () => sendInvitations(mail)),
    repeat(60_000, log, () => endWaivers(pool)),
    repeat(20_000, log, () => removeDiscarded(pool, storage)),
    repeat(600_000, log, () => dropForgottenDrafts(pool)),
    repeat(3_600_000, log, () => pool.query(`delete from live_events where at < now() - interval '1 day'`)),
    repeat(3_600_000, log, () => database.rows('select auth.sweep_sessions()')),
    repeat(3_600_000, log, () => storage.prepare()),
  ];
  const pulse = await showPulse(config);
  log.info('the worker runs');

  const stop = async () => {
    for (const end of stops) end();
    await releaseAll({ pool, running }).catch(() => undefined);
    await boss.stop({ graceful: false, wait: false }).catch(() => undefined);
    await pulse.end().catch(() => undefined);
    process.exit(0);
  };
  process.once('SIGTERM', () => void stop());
  process.once('SIGINT', () => void stop());
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof ConfigError || error instanceof UnsafeDatabase ? error.message : error instanceof Error ? error.stack : String(error)}\n`);
  process.exit(1);
});
