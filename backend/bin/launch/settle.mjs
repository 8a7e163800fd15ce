/** Decides, from the environment, what this start runs itself and what stands elsewhere. */
import { join, resolve } from 'node:path';
import { CLONE, LOCAL, localSecrets } from './paths.mjs';
import { PlainError } from './say.mjs';

const DEFAULT_PORT = 4180;
export const DATABASE = 'crosstie';

function portOf(env, name, fallback) {
  const text = env[name]?.trim();
  if (!text) return fallback;
  const port = Number(text);
  if (Number.isInteger(port) && port > 0 && port < 65_536) return port;
  throw new PlainError(`${name} is ${text}, which is no port. Use a whole number from 1 to 65535.`);
}

/** The same rule as shared/loopback.ts, which is not compiled yet when this runs. */
function isLoopback(address) {
  if (!URL.canParse(address)) throw new PlainError(`${address} is no address. PUBLIC_URL takes one such as https://crosstie.example`);
  const { hostname } = new URL(address);
  return hostname === 'localhost' || hostname === '[::1]' || /^127(\.\d{1,3}){3}$/.test(hostname);
}

function portsOf(env) {
  const web = portOf(env, 'PORT', DEFAULT_PORT);
  return {
    web,
    provider: portOf(env, 'IDP_PORT', web + 1),
    mailPage: portOf(env, 'MAIL_PAGE_PORT', web + 2),
    mailSmtp: portOf(env, 'MAIL_SMTP_PORT', web + 3),
  };
}

function refuseHalfAnInstallation(env, local, publicUrl) {
  const elsewhere = !isLoopback(publicUrl);
  const missing = [];
  if (elsewhere && local.provider) missing.push('OIDC_ISSUER (the demo\'s identity provider serves only this machine)');
  if (elsewhere && local.mail) missing.push('SMTP_URL (caught mail reaches nobody)');
  if (!local.database && !env.DATABASE_WORKER_URL) missing.push('DATABASE_WORKER_URL (the worker has a role of its own)');
  if (!local.database && !env.STORAGE_DIR) missing.push('STORAGE_DIR (files belong beside the database that names them)');
  if (missing.length > 0) throw new PlainError(`This installation also needs:\n  ${missing.join('\n  ')}\nThe README's table says what each one takes.`);
}

/**
 * `local` says which of database, provider and mail this start runs; `ports`, `publicUrl` and `env`
 * (what the processes get, save the addresses of a local database) follow from it; `folder` takes logs and
 * what the local services keep.
 */
export function settle(env = process.env) {
  const ports = portsOf(env);
  const given = (name) => Boolean(env[name]?.trim());
  const local = { database: !given('DATABASE_URL'), provider: !given('OIDC_ISSUER'), mail: !given('SMTP_URL') };
  const publicUrl = (env.PUBLIC_URL?.trim() || `http://127.0.0.1:${ports.web}`).replace(/\/+$/, '');
  refuseHalfAnInstallation(env, local, publicUrl);
  const secrets = localSecrets();
  return { ports, local, publicUrl, secrets, folder: LOCAL, env: environment(env, { ports, local, publicUrl, secrets }) };
}

function environment(env, { ports, local, publicUrl, secrets }) {
  const provider = local.provider && {
    OIDC_ISSUER: `http://127.0.0.1:${ports.provider}`, OIDC_CLIENT_ID: 'crosstie', OIDC_CLIENT_SECRET: secrets.client,
  };
  const mail = local.mail && { SMTP_URL: `smtp://127.0.0.1:${ports.mailSmtp}` };
  return {
    NODE_ENV: 'production',
    ...env,
    PORT: String(ports.web),
    PUBLIC_URL: publicUrl,
    SESSION_SECRET: env.SESSION_SECRET?.trim() || secrets.session,
    STORAGE_DIR: resolve(CLONE, env.STORAGE_DIR?.trim() || join(LOCAL, 'storage')),
    ...provider,
    ...mail,
  };
}

const databaseVariables = ['DATABASE_URL', 'DATABASE_WORKER_URL', 'DATABASE_OWNER_URL', 'DATABASE_BACKUP_URL'];

/** `env` with the database addresses of `wanted` alone: no process holds another one's password. */
export function withDatabase(env, wanted) {
  const others = Object.entries(env).filter(([name]) => !databaseVariables.includes(name) || wanted.includes(name));
  return Object.fromEntries(others);
}

/** The addresses of a cluster of this clone, by variable. */
export function databaseAddresses(cluster, secrets) {
  const url = (role) => cluster.url(`crosstie_${role}`, secrets[role], DATABASE);
  return { DATABASE_URL: url('app'), DATABASE_WORKER_URL: url('worker'), DATABASE_OWNER_URL: url('owner'), DATABASE_BACKUP_URL: url('backup') };
}
