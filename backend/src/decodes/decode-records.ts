import type { Pool, PoolClient } from 'pg';
import type { DecodeResult } from '#shared/decode';
import { DECODE_STEPS, type Side } from '#shared/vocabulary';
import { audiencesOf, resultFor, type SnapshotRights } from './audiences.js';
import { keepHints } from './keep-hints.js';

/** The worker's reads and writes of decodes, under the worker's own role and policies. */
export interface Claimed {
  readonly id: string;
  readonly attempt: number;
  readonly number: number;
  readonly issueId: string;
  readonly programmeId: string;
  readonly reach: 'everyone' | 'my-party';
  readonly partyId: string;
  readonly transmitter: Side | null;
  readonly link: 'air' | 'wifi' | 'fronthaul';
}

/** A killed worker's decode runs again once its lease has run out; well within a minute. */
export const LEASE_S = 20;

/** Takes a decode that waits, or whose worker has gone silent. Null where there is nothing to do. */
export async function claim(pool: Pool, decodeId: string): Promise<Claimed | null> {
  const { rows } = await pool.query<Claimed>(`
    update decodes d set state = 'running', attempt = attempt + 1, step = 'reading', progress = 0, started_at = now(), leased_until = now() + $2 * interval '1 second'
    from issues i join links l on l.id = i.link_id
    where d.id = $1 and i.id = d.issue_id and (d.state = 'queued' or (d.state = 'running' and d.leased_until < now()))
    returning d.id, d.attempt, d.number, d.issue_id as "issueId", d.programme_id as "programmeId", d.reach, d.party_id as "partyId", d.transmitter, l.interface as link`,
  [decodeId, LEASE_S]);
  return rows[0] ?? null;
}

/** False where another worker has taken the decode over, or it is to run no more. */
export async function renew(pool: Pool, { id, attempt }: Claimed): Promise<boolean> {
  const { rowCount } = await pool.query(`update decodes set leased_until = now() + $3 * interval '1 second' where id = $1 and attempt = $2 and state = 'running'`, [id, attempt, LEASE_S]);
  return rowCount === 1;
}

/** Gives up the lease, so that the next worker takes the decode over at once. */
export async function release(pool: Pool, { id, attempt }: Claimed): Promise<void> {
  await pool.query(`update decodes set leased_until = now() where id = $1 and attempt = $2 and state = 'running'`, [id, attempt]);
}

export async function reportProgress(pool: Pool, claimed: Claimed, { step, fraction }: { step: string; fraction: number }): Promise<void> {
  if (!(DECODE_STEPS as readonly string[]).includes(step)) return;
  const progress = Math.min(1, Math.max(0, fraction));
  const { rowCount } = await pool.query(`update decodes set step = $3, progress = $4 where id = $1 and attempt = $2 and state = 'running'`, [claimed.id, claimed.attempt, step, progress]);
  if (rowCount === 1) await announce(pool, claimed, { topic: 'decode', step, progress });
}

async function announce(client: Pool | PoolClient, claimed: Claimed, event: { topic: 'decode' | 'issue'; step: string | null; progress: number | null }): Promise<void> {
  await client.query('insert into live_events (programme_id, issue_id, decode_id, party_id, topic, step, progress) values ($1, $2, $3, $4, $5, $6, $7)',
    [claimed.programmeId, claimed.issueId, claimed.id, claimed.reach === 'my-party' ? claimed.partyId : null, event.topic, event.step, event.progress]);
}

/**
 * Runs once: what an attempt says that was taken over is dropped whole. Under the issue's lock, so
 * that a file is either withdrawn before (and there is nothing to record) or after (and the record goes).
 */
async function once(pool: Pool, claimed: Claimed, work: (client: PoolClient) => Promise<boolean>): Promise<boolean> {
  const client = await pool.connect();
  try {
    await client.query('begin');
    await client.query('select access.lock_issue($1)', [claimed.issueId]);
    const done = await work(client);
    if (done) await tellReaders(client, claimed);
    await client.query(done ? 'commit' : 'rollback');
    return done;
  } catch (error) {
    await client.query('rollback').catch(() => undefined);
    throw error;
  } finally {
    client.release();
  }
}

async function tellReaders(client: PoolClient, claimed: Claimed): Promise<void> {
  if (claimed.reach === 'everyone') {
    await client.query('select access.mark_likely($1)', [claimed.issueId]);
    await client.query('update issues set updated_at = now() where id = $1', [claimed.issueId]);
  }
  await announce(client, claimed, { topic: 'decode', step: 'done', progress: 1 });
  await announce(client, claimed, { topic: 'issue', step: null, progress: null });
}

/** Stores the result once an audience, the hints, and what the register shows of them. */
export function storeResult(pool: Pool, claimed: Claimed, result: DecodeResult): Promise<boolean> {
  return once(pool, claimed, async (client) => {
    const rights = await rightsOf(client, claimed.id);
    if (claimed.reach === 'everyone' && rights.some(({ reach }) => reach === 'my-party')) return dropped(client, claimed);
    const { rowCount } = await client.query(`
      update decodes set state = 'done', step = 'done', progress = 1, finished_at = now(), leased_until = null, engine_version = $3
      where id = $1 and attempt = $2 and state = 'running'`, [claimed.id, claimed.attempt, result.engine.version]);
    if (rowCount !== 1) return false;
    for (const { partyId, view } of audiencesOf(claimed, rights)) {
      await client.query('insert into decode_results (decode_id, programme_id, attempt, audience_party_id, result) values ($1, $2, $3, $4, $5)',
        [claimed.id, claimed.programmeId, claimed.attempt, partyId, JSON.stringify(resultFor(result, view))]);
    }
    await keepHints(client, claimed, result.hints);
    const found = result.hints.length;
    await history(client, claimed, found === 0 ? `decode ${claimed.number} found no mismatch` : `decode ${claimed.number} found ${found === 1 ? 'one likely mismatch' : `${found} likely mismatches`}`);
    return true;
  });
}

export function storeFailure(pool: Pool, claimed: Claimed, failure: { code: string; message: string }): Promise<boolean> {
  return once(pool, claimed, async (client) => {
    const { rowCount } = await client.query(`
      update decodes set state = 'failed', finished_at = now(), leased_until = null, error_code = $3, error_message = $4
      where id = $1 and attempt = $2 and state = 'running'`, [claimed.id, claimed.attempt, failure.code, failure.message]);
    if (rowCount !== 1) return false;
    await history(client, claimed, `decode ${claimed.number} could not run`);
    return true;
  });
}

async function history(client: PoolClient, claimed: Claimed, text: string): Promise<void> {
  const own = claimed.reach === 'my-party';
  await client.query(`insert into events (programme_id, issue_id, kind, text, reach, party_id) values ($1, $2, 'decode', $3, $4, $5)`, [claimed.programmeId, claimed.issueId, text, claimed.reach, own ? claimed.partyId : null]);
}

/** A snapshot was kept to its owner while the decode ran: what rests on it, be it only a count, is for nobody else. */
async function dropped(client: PoolClient, claimed: Claimed): Promise<boolean> {
  const { rowCount } = await client.query(`
    update decodes set state = 'failed', finished_at = now(), leased_until = null, input_withdrawn = true, error_code = 'reach-narrowed',
      error_message = 'A file was taken out of the comparison while this decode ran. Ask for another one.'
    where id = $1 and attempt = $2 and state = 'running'`, [claimed.id, claimed.attempt]);
  return rowCount === 1;
}

/** Read again in the transaction that stores: a reach may have been narrowed while the decode ran. */
async function rightsOf(client: PoolClient, decodeId: string): Promise<SnapshotRights[]> {
  const { rows } = await client.query<SnapshotRights>(`
    select right(n.role, 1) as side, f.reach, array[f.party_id, f.uploader_party_id] as parties
    from decode_inputs n join files f on f.id = n.file_id where n.decode_id = $1 and n.role in ('snapshot-a', 'snapshot-b')`, [decodeId]);
  return rows;
}
