/** The processes of a running Crosstie, and how each is started. */
import { join } from 'node:path';
import { CLONE } from './paths.mjs';
import { withDatabase } from './settle.mjs';
import { waitFor } from './wait-for.mjs';

/** Compiled files in production; sources, restarted at each change, in development. */
const runs = {
  production: (file) => [join('dist', `${file}.js`)],
  development: (file) => [join('node_modules/tsx/dist/cli.mjs'), 'watch', '--clear-screen=false', '--conditions=source', `${file}.ts`],
};

const logOf = (folder, name) => join(folder, 'logs', `${name.replaceAll(' ', '-')}.log`);

/** Starts one part of the product and, with `url`, waits until it answers. */
async function startPart(launcher, name, { file, env, folder, url, mode = 'production' }) {
  const logFile = logOf(folder, name);
  const part = launcher.start(name, { args: runs[mode](file), env, cwd: CLONE, logFile });
  if (url) await waitFor(url, { part, launcher });
  return part;
}

/** The identity provider and the mail catcher of a local instance; they are not worked on, so never restarted. */
export async function startLocalServices(launcher, { ports, local, env, folder }) {
  const provider = local.provider && startPart(launcher, 'identity provider', {
    folder, file: 'dev-idp/main', url: `http://127.0.0.1:${ports.provider}/health`,
    env: { ...withDatabase(env, []), IDP_PORT: String(ports.provider), IDP_STORE_DIR: join(folder, 'provider') },
  });
  const mail = local.mail && startPart(launcher, 'mail catcher', {
    folder, file: 'backend/src/mail-catcher/main', url: `http://127.0.0.1:${ports.mailPage}/health`,
    env: { ...withDatabase(env, []), MAIL_PAGE_PORT: String(ports.mailPage), MAIL_SMTP_PORT: String(ports.mailSmtp), MAIL_DIR: join(folder, 'mail') },
  });
  await Promise.all([provider, mail]);
}

/**
 * The worker (which also writes mail as the person who reads it, hence both addresses) and the server; resolves when /api/health says that all parts are up.
 */
export async function startProduct(launcher, { ports, env, folder, mode }) {
  await startPart(launcher, 'worker', { folder, file: 'backend/src/worker', env: withDatabase(env, ['DATABASE_WORKER_URL', 'DATABASE_URL']), mode });
  const url = `http://127.0.0.1:${ports.web}/api/health`;
  await startPart(launcher, 'server', { folder, file: 'backend/src/main', env: withDatabase(env, ['DATABASE_URL']), url, mode });
}

/** Vite, which serves the pages from their sources and passes /api on to the server. */
export async function startPages(launcher, { ports, env, folder }) {
  const args = [join('node_modules/vite/bin/vite.js'), '--config', 'frontend/vite.config.ts', '--host', '127.0.0.1', '--clearScreen', 'false'];
  const settings = { ...withDatabase(env, []), VITE_PORT: String(ports.pages) };
  const part = launcher.start('pages', { args, env: settings, cwd: CLONE, logFile: logOf(folder, 'pages') });
  await waitFor(`http://127.0.0.1:${ports.pages}/`, { part, launcher });
}
