import type { CookieOptions, Request } from 'express';
import type { Config } from '../config.js';

/** Cookies do not separate ports, so that each name carries the port. */
export interface CookieNames {
  session: string;
  /** The provider's token for the session, needed to end it there. */
  provider: string;
  /** Prefix: one cookie for each sign-in under way. */
  pending: string;
}

export function isHttps(config: Config): boolean {
  return config.publicUrl.startsWith('https:');
}

export function cookieNames(config: Config): CookieNames {
  const name = `${isHttps(config) ? '__Host-' : ''}crosstie_${config.port}`;
  return { session: name, provider: `${name}_provider`, pending: `${name}_sign_in_` };
}

export function cookieOptions(config: Config, maxAgeMs?: number): CookieOptions {
  return { httpOnly: true, sameSite: 'lax', secure: isHttps(config), path: '/', ...(maxAgeMs === undefined ? {} : { maxAge: maxAgeMs }) };
}

/** All cookies of a request; of two with one name the first counts. */
export function readCookies(request: Request): Map<string, string> {
  const found = new Map<string, string>();
  for (const pair of (request.headers.cookie ?? '').split(';')) {
    const at = pair.indexOf('=');
    if (at < 0) continue;
    const name = pair.slice(0, at).trim();
    if (!found.has(name)) found.set(name, decoded(pair.slice(at + 1).trim()));
  }
  return found;
}

function decoded(value: string): string {
  try {
    return decodeURIComponent(value);
  } catch {
    return value;
  }
}
