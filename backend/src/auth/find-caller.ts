import type { RequestHandler } from 'express';
import type { Config } from '../config.js';
import { setCaller } from '../http/endpoint.js';
import { cookieNames, readCookies } from './cookies.js';
import type { SessionStore } from './session-store.js';
import { hashToken } from './tokens.js';

/** Finds the person of the request's session and names them to what follows; refuses nobody. */
export function findCaller(config: Config, sessions: SessionStore): RequestHandler {
  const names = cookieNames(config);
  return async (request, _response, next) => {
    const token = readCookies(request).get(names.session);
    const found = token ? await sessions.find(hashToken(token)) : null;
    if (found) setCaller(request, { personId: found.personId, name: found.name, sessionId: found.sessionId });
    next();
  };
}
