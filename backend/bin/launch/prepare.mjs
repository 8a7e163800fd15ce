/** Brings the database up to date before anything connects to it. */
import { CLONE, rememberState } from './paths.mjs';
import { mustRun } from './run-command.mjs';
import { withDatabase } from './settle.mjs';

/**
 * Runs backend/src/ops/prepare: migrates (with an owner's address) or checks the version, and fills a
 * local instance with the demo once.
 */
export async function prepareDatabase({ env, local, track }) {
  const isLocal = local.database && local.provider;
  const args = ['dist/backend/src/ops/prepare.js'];
  const environment = { ...withDatabase(env, ['DATABASE_URL', 'DATABASE_OWNER_URL']), CROSSTIE_LOCAL_INSTANCE: String(isLocal) };
  await mustRun(process.execPath, args, { cwd: CLONE, env: environment, track, stdio: ['ignore', 'inherit', 'pipe'], purpose: 'Preparing the database' });
  rememberState({ issuer: env.OIDC_ISSUER, publicUrl: env.PUBLIC_URL });
}
