import { existsSync } from 'node:fs';
import { join } from 'node:path';
import express, { type Express, type RequestHandler } from 'express';
import { accountEndpoints } from './account/endpoints.js';
import { findCaller } from './auth/find-caller.js';
import { refuseForgery } from './auth/forgery.js';
import { authRouter } from './auth/routes.js';
import { sqlSessionStore } from './auth/session-store.js';
import { decodeEndpoints } from './decodes/endpoints.js';
import { downloadRouter } from './files/download.js';
import { fileEndpoints } from './files/endpoints.js';
import { Storage } from './files/storage.js';
import { uploadRouter } from './files/upload.js';
import { callerOf } from './http/endpoint.js';
import { healthRouter } from './http/health.js';
import { notFound, renderErrors } from './http/problems.js';
import { securityHeaders } from './http/security.js';
import type { Services } from './http/services.js';
import { issueEndpoints } from './issues/endpoints.js';
import { exportRouter } from './issues/export-csv.js';
import { linkEndpoints } from './links/endpoints.js';
import type { LiveHub } from './live/live-hub.js';
import { liveRouter } from './live/stream.js';
import { overviewEndpoints } from './overview/endpoints.js';
import { programmeEndpoints } from './programmes/endpoints.js';
import { threadEndpoints } from './threads/endpoints.js';

export interface Parts {
  readonly services: Services;
  readonly storage: Storage;
  readonly hub: LiveHub;
  /** How often a quiet stream of events is checked. */
  readonly heartbeatMs?: number;
  /** The built pages; absent in API tests and in development, where Vite serves them. */
  readonly pages?: string;
}

/** The features in the order in which data flows: files, decodes, issues, thread, overview. */
export function createApp({ services, storage, hub, heartbeatMs, pages }: Parts): Express {
  const { config, database, log } = services;
  const sessions = sqlSessionStore(database.query);
  const app = express();
  app.disable('x-powered-by');
  app.set('etag', false);
  app.set('query parser', 'simple');
  if (config.trustProxy) app.set('trust proxy', config.trustProxy);
  app.use(securityHeaders(config));

  app.use('/api', findCaller(config, sessions));
  app.use(healthRouter(services));
  app.use(authRouter({ config, sessions, log }));
  app.use('/api', refuseAnonymous, refuseForgery(config), privateAnswers);

  // Bytes are never held in memory: uploads come before the JSON parser.
  app.use(uploadRouter(services, storage));
  app.use(downloadRouter(services, storage));
  app.use('/api', express.json({ limit: '256kb' }));
  app.use(exportRouter(services));
  app.use(liveRouter(services, hub, heartbeatMs));

  const router = express.Router();
  const endpoints = [
    ...fileEndpoints(storage), ...decodeEndpoints, ...issueEndpoints, ...threadEndpoints,
    ...linkEndpoints, ...overviewEndpoints, ...programmeEndpoints, ...accountEndpoints,
  ];
  for (const endpoint of endpoints) endpoint.mount(router, services);
  app.use(router);
  app.use('/api', () => {
    throw notFound();
  });

  if (pages) servePages(app, pages);
  app.use(renderErrors((error, path) => log.error({ error, path }, 'a request failed')));
  return app;
}

/** 401 for the anonymous on every path, existing or not. */
const refuseAnonymous: RequestHandler = (request, _response, next) => {
  callerOf(request);
  next();
};

const privateAnswers: RequestHandler = (_request, response, next) => {
  response.set('cache-control', 'private, no-store');
  next();
};

/** The single page for every address that is not the API's; built files carry a hash and stay. */
function servePages(app: Express, pages: string): void {
  const index = join(pages, 'index.html');
  if (!existsSync(index)) throw new Error(`The pages are not built (${index} is missing). Run npm run build.`);
  app.use('/assets', express.static(join(pages, 'assets'), { immutable: true, maxAge: '365d', index: false }), () => {
    throw notFound();
  });
  app.use(express.static(pages, { index: false, maxAge: 0 }));
  app.get('/{*path}', (_request, response) => {
    response.set('cache-control', 'no-cache').sendFile(index);
  });
}
