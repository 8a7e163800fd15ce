import { resolve } from 'node:path';
import express, { type Express } from 'express';
import { SMTPServer } from 'smtp-server';
import { plainPageFaces, plainPageStyle } from '#shared/plain-page';
import type { KeptMail } from './kept-mail.js';
import { listPage, messagePage, missingPage } from './pages.js';

const LIMIT_BYTES = 10_000_000;
const POLICY = "default-src 'none'; style-src 'self'; font-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'";

/** Takes any message, for anyone, and delivers none. */
export function createSmtpCatcher(kept: KeptMail): SMTPServer {
  return new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    disableReverseLookup: true,
    size: LIMIT_BYTES,
    onData(stream, _session, done) {
      kept.keep(stream, LIMIT_BYTES).then(() => done(), (error: Error) => done(error));
    },
  });
}

/** The page on which a developer reads what was sent; GET /messages.json is for programs. */
export function createMailPage(kept: KeptMail): Express {
  const app = express().disable('x-powered-by');
  app.use((_request, response, next) => {
    response.set({ 'content-security-policy': POLICY, 'x-content-type-options': 'nosniff', 'referrer-policy': 'no-referrer', 'cache-control': 'no-store' });
    next();
  });
  app.get('/health', (_request, response) => { response.json({ status: 'up' }); });
  app.get('/look/page.css', (_request, response) => { response.type('css').send(plainPageStyle); });
  // Every process of the product runs in the project's own folder.
  for (const face of plainPageFaces) app.get(`/look/${face}`, (_request, response) => response.sendFile(face, { root: resolve('fonts') }));
  app.get('/', async (_request, response) => { response.send(listPage(await kept.all())); });
  app.get('/messages.json', async (_request, response) => { response.json({ items: await kept.all() }); });
  app.get('/messages/:id', async (request, response) => {
    const message = await kept.read(request.params.id);
    response.status(message ? 200 : 404).send(message ? messagePage(message) : missingPage());
  });
  return app;
}
