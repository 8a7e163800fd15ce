import { z } from 'zod';
import { Database } from '../db/database.js';
import { migrate } from '../db/migrate.js';
import { refuseOtherVersion, UnsafeDatabase } from '../db/safe-role.js';
import { seedDemo } from '../demo/seed-demo.js';
import { moveLocalIssuer } from './move-issuer.js';

/** The database before a start: migrated by its owner, or found to be of this version. */
const settings = z.object({
  DATABASE_URL: z.string(),
  DATABASE_OWNER_URL: z.string().optional(),
  OIDC_ISSUER: z.string(),
  /** Database and provider are both this clone's own: the demo belongs here. */
  CROSSTIE_LOCAL_INSTANCE: z.enum(['true', 'false']).default('false'),
  STORAGE_DIR: z.string().optional(),
}).parse(process.env);

function say(line: string): void {
  process.stdout.write(`${line}\n`);
}

async function checkVersion(): Promise<void> {
  const database = new Database(settings.DATABASE_URL, { pool: 1 });
  try {
    await refuseOtherVersion(database);
  } finally {
    await database.close();
  }
}

/** The captures are made as they are stored, which takes a while: each issue is counted. */
async function seed(ownerUrl: string, storageDir: string): Promise<void> {
  const done = await seedDemo({ ownerUrl, storageDir, issuer: settings.OIDC_ISSUER, onProgress: (count, of) => count % 5 === 0 && say(`Making the demo: ${count} of ${of} issues`) });
  if (done) say('Filled the database with the demo');
}

async function prepare(): Promise<void> {
  const { DATABASE_OWNER_URL: ownerUrl, STORAGE_DIR: storageDir, OIDC_ISSUER: issuer } = settings;
  if (ownerUrl) {
    const applied = await migrate(ownerUrl);
    if (applied.length > 0) say(`Migrated the database to ${applied.at(-1)}`);
    if (settings.CROSSTIE_LOCAL_INSTANCE === 'true' && storageDir) {
      await moveLocalIssuer(ownerUrl, issuer);
      await seed(ownerUrl, storageDir);
    }
  }
  await checkVersion();
}

try {
  await prepare();
} catch (error) {
  process.stderr.write(`${error instanceof UnsafeDatabase ? error.message : String((error as Error).stack ?? error)}\n`);
  process.exitCode = 1;
}
