import { timingSafeEqual } from 'node:crypto';
import { resolve } from 'node:path';
import express, { type Express, type Request, type Response } from 'express';
import type { Provider } from 'oidc-provider';
import { plainPageFaces, plainPageStyle } from '#shared/plain-page';
import { accountByEmail, DEMO_PASSWORD } from './accounts.js';
import { createProvider, pagePolicy } from './provider.js';
import type { ProviderSettings } from './settings.js';
import { errorPage, signInPage, signOutScript } from './views.js';

function isPassword(given: string, wanted: string): boolean {
  const [a, b] = [Buffer.from(given), Buffer.from(wanted)];
  return a.length === b.length && timingSafeEqual(a, b);
}

function field(value: unknown): string {
  return typeof value === 'string' ? value : '';
}

function serveLook(app: Express): void {
  app.get('/look/page.css', (_request, response) => { response.type('css').send(plainPageStyle); });
  app.get('/look/sign-out.js', (_request, response) => { response.type('js').send(signOutScript); });
  // Every process of the product runs in the project's own folder.
  for (const face of plainPageFaces) app.get(`/look/${face}`, (_request, response) => response.sendFile(face, { root: resolve('fonts') }));
}

function protect(settings: ProviderSettings) {
  return (_request: Request, response: Response, next: () => void) => {
    response.set('content-security-policy', pagePolicy(settings.publicUrl));
    response.set({ 'x-content-type-options': 'nosniff', 'referrer-policy': 'no-referrer', 'cache-control': 'no-store' });
    next();
  };
}

function serveSignIn(app: Express, provider: Provider, settings: ProviderSettings): void {
  app.get('/interaction/:uid', async (request, response) => {
    const { uid } = await provider.interactionDetails(request, response);
    response.send(signInPage({ uid, email: field(request.query['email']) }));
  });
  app.post('/interaction/:uid', express.urlencoded({ extended: false }), async (request, response) => {
    const { uid } = await provider.interactionDetails(request, response);
    const email = field(request.body?.email);
    const account = accountByEmail(email);
    if (!account || !isPassword(field(request.body?.password), settings.password ?? DEMO_PASSWORD)) {
      response.status(401).send(signInPage({ uid, email, refused: true }));
      return;
    }
    await provider.interactionFinished(request, response, { login: { accountId: account.sub } });
  });
}

/** The whole provider: sign-in page, look, and the protocol's own endpoints. */
export function createProviderApp(settings: ProviderSettings): Express {
  const provider = createProvider(settings);
  const app = express().disable('x-powered-by');
  app.get('/health', (_request, response) => { response.json({ status: 'up' }); });
  app.use(['/interaction', '/session', '/look'], protect(settings));
  serveLook(app);
  serveSignIn(app, provider, settings);
  app.use('/interaction', (_error: unknown, _request: Request, response: Response, _next: () => void) => {
    response.status(400).send(errorPage('This sign-in has expired or was begun in another browser. Begin again in Crosstie.', settings.publicUrl));
  });
  app.use(provider.callback());
  return app;
}
