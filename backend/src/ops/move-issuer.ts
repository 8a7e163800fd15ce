import { Client } from 'pg';

/** Issuers of the demo's provider, whatever its port was. */
const LOCAL = '^http://127\\.0\\.0\\.1:[0-9]+$';

/**
 * The demo's provider moved to another port, or its database was restored elsewhere: its people are the
 * same, so their issuer moves along. Issuers elsewhere stay as they are.
 */
export async function moveLocalIssuer(ownerUrl: string, issuer: string): Promise<void> {
  const owner = new Client({ connectionString: ownerUrl });
  await owner.connect();
  try {
    for (const table of ['people', 'parties']) await owner.query(`update ${table} set issuer = $1 where issuer ~ $2 and issuer <> $1`, [issuer, LOCAL]);
  } finally {
    await owner.end();
  }
}
