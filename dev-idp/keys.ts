import { generateKeyPairSync, randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { JWKS } from 'oidc-provider';

export interface ProviderKeys { jwks: JWKS; cookieKeys: string[] }

/** Signing and cookie keys, made once and kept, so that tokens and sessions outlive a restart. */
export function providerKeys(folder: string): ProviderKeys {
  const file = join(folder, 'keys.json');
  if (existsSync(file)) return JSON.parse(readFileSync(file, 'utf8')) as ProviderKeys;
  const { privateKey } = generateKeyPairSync('rsa', { modulusLength: 2048 });
  const jwk = { ...privateKey.export({ format: 'jwk' }), use: 'sig', alg: 'RS256', kid: randomBytes(8).toString('hex') };
  const keys = { jwks: { keys: [jwk] } as JWKS, cookieKeys: [randomBytes(32).toString('base64url')] };
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  writeFileSync(file, JSON.stringify(keys), { mode: 0o600 });
  return keys;
}
