import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits for a cookie or a link; only their hash is stored. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

export function hashToken(token: string): Buffer {
  return createHash('sha256').update(token).digest();
}
