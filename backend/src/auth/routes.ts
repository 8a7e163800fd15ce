import { Router, type Request, type Response } from 'express';
import { rateLimit } from 'express-rate-limit';
import type { Logger } from 'pino';
import { isLoopback } from '#shared/loopback';
import type { Config } from '../config.js';
import { Refusal, signInFirst } from '../http/problems.js';
import { cookieNames, cookieOptions, readCookies } from './cookies.js';
import { refuseForgery } from './forgery.js';
import { PENDING_MS, PendingSeal, type PendingSignIn } from './pending-sign-in.js';
import { ProviderClient, type ProviderPerson } from './provider.js';
import { localPath } from './return-to.js';
import type { SessionStore } from './session-store.js';
import { hashToken, newToken } from './tokens.js';

export interface AuthParts {
  config: Config;
  sessions: SessionStore;
  log: Pick<Logger, 'warn'>;
}

/** How a sign-in ended other than in; the sign-in page says it in words. */
type Outcome = 'refused' | 'expired' | 'unavailable';
const DAY_MS = 86_400_000;
const MOST_PENDING = 5;
const LONGEST_COOKIE = 3800;

/** Who you are: sign-in, its callback, sign-out, and the session of the moment. What you may, the policies say. */
export function authRouter(parts: AuthParts): Router {
  const flow = new SignInFlow(parts);
  const router = Router();
  const limit = limiter(parts.config);
  router.get('/api/auth/sign-in', limit, (request, response) => flow.start(request, response));
  router.get('/api/auth/callback', limit, (request, response) => flow.finish(request, response));
  router.get('/api/auth/session', (request, response) => flow.show(request, response));
  router.post('/api/auth/sign-out', refuseForgery(parts.config), (request, response) => flow.end(request, response));
  return router;
}

function limiter(config: Config) {
  return rateLimit({
    windowMs: 60_000,
    limit: config.limits.signInsPerMinute,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    handler: (_request, _response, next) => next(new Refusal(429, 'too-many', 'Too many sign-ins', 'Wait a minute, then try again.')),
  });
}

class SignInFlow {
  readonly #config: Config;
  readonly #sessions: SessionStore;
  readonly #log: AuthParts['log'];
  readonly #provider: ProviderClient;
  readonly #seal: PendingSeal;
  readonly #names: ReturnType<typeof cookieNames>;

  constructor({ config, sessions, log }: AuthParts) {
    this.#config = config;
    this.#sessions = sessions;
    this.#log = log;
    this.#provider = new ProviderClient(config);
    this.#seal = new PendingSeal(config.session.secret);
    this.#names = cookieNames(config);
  }

  /** GET /api/auth/sign-in?returnTo=&invitation=&again=: to the provider. */
  async start(request: Request, response: Response): Promise<void> {
    const elsewhere = this.#sameServerOtherName(request);
    if (elsewhere) return response.redirect(302, elsewhere);
    const { returnTo, invitation, again } = request.query;
    const pending: PendingSignIn = {
      state: newToken(), nonce: newToken(), verifier: newToken(), returnTo: localPath(returnTo),
      invitation: typeof invitation === 'string' && invitation !== '' ? invitation.slice(0, 200) : null,
      expiresAt: Date.now() + PENDING_MS,
    };
    try {
      const url = await this.#provider.signInUrl(pending, again !== undefined);
      this.#keepPending(request, response, pending);
      response.redirect(302, url);
    } catch (error) {
      this.#giveUp(response, 'unavailable', error);
    }
  }

  /** GET /api/auth/callback: back from the provider; a new session, never an old one's name. */
  async finish(request: Request, response: Response): Promise<void> {
    const pending = this.#takePending(request, response);
    if (!pending) return this.#giveUp(response, 'expired');
    let person: ProviderPerson;
    try {
      person = await this.#provider.redeem(queryOf(request), pending);
    } catch (error) {
      return this.#giveUp(response, 'unavailable', error);
    }
    await this.#endCurrent(request);
    const token = newToken();
    if (!(await this.#begin(person, { token, pending, agent: request.headers['user-agent'] ?? '' }))) return this.#giveUp(response, 'refused');
    this.#keepSession(response, token, person.idToken);
    response.redirect(303, pending.returnTo);
  }

  /** GET /api/auth/session: who I am, or 401. */
  async show(request: Request, response: Response): Promise<void> {
    const token = readCookies(request).get(this.#names.session);
    const found = token ? await this.#sessions.find(hashToken(token)) : null;
    if (!found) throw signInFirst();
    response.set('cache-control', 'no-store');
    response.json({ person: { id: found.personId, name: found.name, email: found.email }, expiresAt: found.expiresAt });
  }

  /** POST /api/auth/sign-out: ends the session here and says where it ends at the provider. */
  async end(request: Request, response: Response): Promise<void> {
    const idToken = readCookies(request).get(this.#names.provider);
    await this.#endCurrent(request);
    const options = cookieOptions(this.#config);
    response.clearCookie(this.#names.session, options).clearCookie(this.#names.provider, options);
    const redirectTo = await this.#provider.signOutUrl(idToken).catch(() => null);
    response.set('cache-control', 'no-store').json({ redirectTo: redirectTo ?? '/' });
  }

  #begin(person: ProviderPerson, { token, pending, agent }: { token: string; pending: PendingSignIn; agent: string }): Promise<boolean> {
    const { idleHours, maxDays } = this.#config.session;
    const { issuer, subject, email, emailVerified, name } = person;
    const invitationHash = pending.invitation === null ? null : hashToken(pending.invitation);
    return this.#sessions.begin({ issuer, subject, email, emailVerified, name, tokenHash: hashToken(token), invitationHash, idleHours, maxDays, agent });
  }

  async #endCurrent(request: Request): Promise<void> {
    const token = readCookies(request).get(this.#names.session);
    if (token) await this.#sessions.end(hashToken(token));
  }

  #keepSession(response: Response, token: string, idToken: string): void {
    const options = cookieOptions(this.#config, this.#config.session.maxDays * DAY_MS);
    response.cookie(this.#names.session, token, options);
    if (idToken.length < LONGEST_COOKIE) response.cookie(this.#names.provider, idToken, options);
  }

  /** Each sign-in under way has a cookie of its own, so that two tabs do not disturb each other. */
  #keepPending(request: Request, response: Response, pending: PendingSignIn): void {
    const open = [...readCookies(request).keys()].filter((name) => name.startsWith(this.#names.pending));
    if (open.length >= MOST_PENDING) for (const name of open) response.clearCookie(name, cookieOptions(this.#config));
    response.cookie(this.#pendingName(pending.state), this.#seal.seal(pending), cookieOptions(this.#config, PENDING_MS));
  }

  #takePending(request: Request, response: Response): PendingSignIn | null {
    const { state } = request.query;
    if (typeof state !== 'string') return null;
    const name = this.#pendingName(state);
    const sealed = readCookies(request).get(name);
    if (sealed === undefined) return null;
    response.clearCookie(name, cookieOptions(this.#config));
    const pending = this.#seal.open(sealed);
    return pending?.state === state ? pending : null;
  }

  #pendingName(state: string): string {
    return `${this.#names.pending}${state.replace(/[^\w-]/g, '').slice(0, 12)}`;
  }

  /** On loopback the same server has several names, and a cookie belongs to one: go on under the public one. */
  #sameServerOtherName(request: Request): string | null {
    const { publicUrl } = this.#config;
    const { host } = request.headers;
    if (!host || !URL.canParse(`http://${host}`) || !isLoopback(publicUrl) || !isLoopback(`http://${host}`)) return null;
    const [asked, wanted] = [new URL(`http://${host}`), new URL(publicUrl)];
    if (asked.port !== wanted.port || asked.hostname === wanted.hostname) return null;
    return `${publicUrl}${request.originalUrl}`;
  }

  #giveUp(response: Response, outcome: Outcome, error?: unknown): void {
    if (error !== undefined) this.#log.warn({ error }, 'a sign-in could not go on');
    response.redirect(303, `/sign-in?outcome=${outcome}`);
  }
}

function queryOf(request: Request): string {
  const at = request.originalUrl.indexOf('?');
  return at < 0 ? '' : request.originalUrl.slice(at);
}
