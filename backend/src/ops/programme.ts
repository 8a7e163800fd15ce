import { createHash, randomBytes } from 'node:crypto';
import { Client } from 'pg';
import { z } from 'zod';
import { programmeCode } from '#shared/api/common';

export const firstProgramme = z.object({
  code: programmeCode,
  name: z.string().trim().min(1).max(120),
  email: z.email().max(254),
  /** The host party, to which the administrator belongs. */
  party: z.string().trim().min(1).max(80),
  issuer: z.url(),
  days: z.coerce.number().positive(),
});
export type FirstProgramme = z.infer<typeof firstProgramme>;

/** Makes a programme, its host party and the invitation of its administrator; returns the invitation's token. */
export async function makeProgramme(ownerUrl: string, wanted: FirstProgramme): Promise<string> {
  const token = randomBytes(32).toString('base64url');
  const client = new Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    await client.query('begin');
    await insert(client, wanted, createHash('sha256').update(token).digest());
    await client.query('commit');
    return token;
  } finally {
    await client.end();
  }
}

async function insert(client: Client, { code, name, email, party, issuer, days }: FirstProgramme, tokenHash: Buffer): Promise<void> {
  const programme = await client.query<{ id: string }>('insert into programmes (code, name) values ($1, $2) on conflict (code) do nothing returning id', [code, name]);
  if (programme.rowCount === 0) throw new Error(`The programme ${code} exists already; its administrator invites everybody else.`);
  const programmeId = programme.rows[0].id;
  const host = await client.query<{ id: string }>(
    "insert into parties (programme_id, name, short_name, parts, issuer) values ($1, $2, $3, '{test lab}', $4) returning id",
    [programmeId, party, party.slice(0, 24).trim(), issuer]);
  await client.query(
    `insert into invitations (programme_id, party_id, email, role, token_hash, invited_by, expires_at)
     values ($1, $2, $3, 'programme-administrator', $4, 'set-up', now() + $5::double precision * interval '1 day')`,
    [programmeId, host.rows[0].id, email, tokenHash, days]);
}
