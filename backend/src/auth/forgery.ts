import type { RequestHandler } from 'express';
import type { Config } from '../config.js';
import { Refusal } from '../http/problems.js';

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);
/** A form on a foreign page cannot send it, and a script there needs a permission that is never given. */
export const OWN_HEADER = 'x-crosstie';

const forged = () => new Refusal(403, 'foreign-request', 'Refused',
  `A request that changes something must come from Crosstie's own pages, with the header ${OWN_HEADER}: 1.`);

/** Protects every changing request against cross-site forgery, beside the cookie's SameSite. */
export function refuseForgery(config: Config): RequestHandler {
  const { origin: own } = new URL(config.publicUrl);
  return (request, _response, next) => {
    if (SAFE.has(request.method)) return next();
    const { origin } = request.headers;
    const site = request.headers['sec-fetch-site'];
    const isForeign = (origin !== undefined && origin !== own) || (site !== undefined && site !== 'same-origin');
    return next(isForeign || request.headers[OWN_HEADER] !== '1' ? forged() : undefined);
  };
}
