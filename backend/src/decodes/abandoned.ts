import type { Pool } from 'pg';

/** A decode that ends three workers is the capture's doing, not chance. */
const MOST_ATTEMPTS = 3;
const GAVE_UP = 'The decode ended without an answer three times and was given up. It has been noted; the files are kept.';

/**
 * Puts decodes whose worker has gone silent back into the queue, row and job in one transaction;
 * answers their identifiers. One that went silent too often fails instead.
 */
export async function requeueAbandoned(pool: Pool): Promise<string[]> {
  const client = await pool.connect();
  try {
    await client.query('begin');
    const { rows: lost } = await client.query<{ id: string; issueId: string }>(`
      update decodes set state = 'failed', finished_at = now(), leased_until = null, error_code = 'gave-up', error_message = $2
      where state = 'running' and leased_until < now() and attempt >= $1 returning id, issue_id as "issueId"`, [MOST_ATTEMPTS, GAVE_UP]);
    for (const { issueId } of lost) await client.query('select access.mark_likely($1)', [issueId]);
    const { rows } = await client.query<{ id: string }>(`
      update decodes set state = 'queued', step = 'waiting', progress = 0, leased_until = null where state = 'running' and leased_until < now() returning id`);
    for (const { id } of rows) await client.query('select access.queue_job($1)', [id]);
    await client.query('commit');
    return rows.map(({ id }) => id);
  } catch (error) {
    await client.query('rollback').catch(() => undefined);
    throw error;
  } finally {
    client.release();
  }
}
