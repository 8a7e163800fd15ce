/** Brings the database up to date before anything connects to it. */
import { CLONE, readState, rememberState } from './paths.mjs';
import { mustRun } from './run-command.mjs';
import { withDatabase } from './settle.mjs';

/**
 * Runs backend/src/ops/prepare: migrates (with an owner's address) or checks the version, and fills a
 * local instance with the demo once.
 */
export async function prepareDatabase({ env, local, track }) {
  const extra = {
    CROSSTIE_SEED: local.database && local.provider ? 'true' : 'false',
    CROSSTIE_EARLIER_ISSUER: (local.database && local.provider && readState().issuer) || '',
  };
  const args = ['dist/backend/src/ops/prepare.js'];
  const environment = { ...withDatabase(env, ['DATABASE_URL', 'DATABASE_OWNER_URL']), ...extra };
  await mustRun(process.execPath, args, { cwd: CLONE, env: environment, track, stdio: ['ignore', 'inherit', 'pipe'], purpose: 'Preparing the database' });
  if (local.provider) rememberState({ issuer: env.OIDC_ISSUER });
}
