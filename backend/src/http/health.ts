import { Router, type Request } from 'express';
import type { Services } from './services.js';

/** The worker holds this advisory lock while it runs, so that its pulse needs no table. */
export const WORKER_LOCK = [4177, 1] as const;
const PATIENCE_MS = 2000;

type Part = 'database' | 'worker' | 'identity provider';

/** GET /api/health: 200 when all parts are up, else 503. Only a signed-in caller learns which. */
export function healthRouter(services: Services): Router {
  const router = Router();
  const check = shared(() => checkParts(services));
  router.get('/api/health', async (request, response) => {
    const parts = await check();
    const up = Object.values(parts).every(Boolean);
    response.set('cache-control', 'no-store');
    response.status(up ? 200 : 503).json(isSignedIn(request) ? { up, parts } : { up });
  });
  return router;
}

function isSignedIn(request: Request): boolean {
  return (request as Request & { caller?: unknown }).caller !== undefined;
}

async function checkParts(services: Services): Promise<Record<Part, boolean>> {
  const [database, worker, provider] = await Promise.all([
    within(services.database.rows('select 1 as up').then(() => true)),
    within(services.database.row('select 1 as up from pg_locks where locktype = \'advisory\' and database = (select oid from pg_database where datname = current_database()) and classid = $1 and objid = $2 and granted', [...WORKER_LOCK]).then((row) => row !== null)),
    within(fetch(`${services.config.oidc.issuer}/.well-known/openid-configuration`, { signal: AbortSignal.timeout(PATIENCE_MS) }).then(({ ok }) => ok)),
  ]);
  return { database, worker, 'identity provider': provider };
}

function within(check: Promise<boolean>): Promise<boolean> {
  const late = new Promise<boolean>((resolve) => {
    setTimeout(() => resolve(false), PATIENCE_MS).unref();
  });
  return Promise.race([check.catch(() => false), late]);
}

/** Anyone may ask: who asks within the same second gets the same answer, and the parts are asked once. */
function shared<T>(ask: () => Promise<T>): () => Promise<T> {
  let at = -Infinity;
  let answer: Promise<T>;
  return () => {
    if (performance.now() - at > 1000) {
      at = performance.now();
      answer = ask();
    }
    return answer;
  };
}
