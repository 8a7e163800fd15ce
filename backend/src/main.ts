import { createServer } from 'node:http';
import { join } from 'node:path';
import { pino } from 'pino';
import { createApp } from './app.js';
import { ConfigError, readConfig } from './config.js';
import { Database } from './db/database.js';
import { refuseOtherVersion, refuseUnsafeRole, UnsafeDatabase } from './db/safe-role.js';
import { Storage } from './files/storage.js';
import { LiveHub } from './live/live-hub.js';
import { projectRoot } from './workers/thread.js';

/** Starts the server and stops it in order. */
async function main(): Promise<void> {
  const config = readConfig('server');
  const log = pino({ level: config.logLevel });
  const database = new Database(config.database.app);
  await refuseUnsafeRole(database);
  await refuseOtherVersion(database);
  const storage = new Storage(config.storageDir);
  await storage.prepare();
  const hub = new LiveHub(config.database.app, log);
  await hub.start();
  const pages = process.env.NODE_ENV === 'development' ? undefined : join(projectRoot(), 'dist/frontend');
  const services = { config, database, log, now: () => new Date() };
  const server = createServer(createApp({ services, storage, hub, ...(pages ? { pages } : {}) }));
  server.listen(config.port, config.host, () => log.info({ port: config.port }, 'the server listens'));

  const stop = async () => {
    server.close();
    server.closeAllConnections();
    await hub.stop();
    await database.close();
    process.exit(0);
  };
  process.once('SIGTERM', () => void stop());
  process.once('SIGINT', () => void stop());
}

main().catch((error: unknown) => {
  const plain = error instanceof ConfigError || error instanceof UnsafeDatabase;
  process.stderr.write(`${plain ? error.message : error instanceof Error ? error.stack : String(error)}\n`);
  process.exit(1);
});
