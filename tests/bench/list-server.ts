import express from 'express';
import { pino } from 'pino';
import { createApp } from '#backend/app';
import { findCaller } from '#backend/auth/find-caller';
import { sqlSessionStore } from '#backend/auth/session-store';
import { readConfig } from '#backend/config';
import { Database } from '#backend/db/database';
import { Storage } from '#backend/files/storage';
import { callerOf } from '#backend/http/endpoint';
import { securityHeaders } from '#backend/http/security';
import { LiveHub } from '#backend/live/live-hub';

/**
 * The product's server in a process of its own, and beside it, behind the same headers and the same
 * session look-up, a reply of fifty rows that stands ready: what the server can do at most.
 */
const config = readConfig('server');
const log = pino({ level: 'silent' });
const database = new Database(config.database.app);
const services = { config, database, log, now: () => new Date() };
const storage = new Storage(config.storageDir);
await storage.prepare();
const app = express().disable('x-powered-by').set('etag', false);
let constant: unknown = null;
app.post('/constant', express.json({ limit: '1mb' }), (request, response) => {
  constant = request.body;
  response.end();
});
app.get('/constant', securityHeaders(config), findCaller(config, sqlSessionStore(database.query)), (request, response) => {
  callerOf(request);
  response.set('cache-control', 'private, no-store').json(constant);
});
app.use(createApp({ services, storage, hub: new LiveHub(config.database.app, log) }));
app.listen(config.port, '127.0.0.1', () => process.stdout.write('ready\n'));
process.stdin.on('end', () => process.exit(0)).resume();
