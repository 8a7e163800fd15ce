import type { Pool, PoolClient } from 'pg';

const TEXT = 'the waiver has ended: back to Cause agreed';
const ASK = 'say what follows now that the waiver has ended';

interface Returned { issueId: string; programmeId: string }

/** Waivers whose last day has passed: the issue returns to Cause agreed. Answers how many. */
export async function endWaivers(pool: Pool): Promise<number> {
  const client = await pool.connect();
  try {
    await client.query('begin');
    const { rows } = await client.query<Returned>(`
      with ended as (update waivers set returned_at = now() where returned_at is null and ends_on < current_date returning issue_id)
      update issues i set stage = 'cause-agreed', version = version + 1, updated_at = now() from ended e
      where i.id = e.issue_id and i.stage = 'waived' returning i.id as "issueId", i.programme_id as "programmeId"`);
    for (const returned of rows) await tell(client, returned);
    await client.query('commit');
    return rows.length;
  } catch (error) {
    await client.query('rollback').catch(() => undefined);
    throw error;
  } finally {
    client.release();
  }
}

/** Everyone waits again for the party that was asked last; history, open pages and mail say so. */
async function tell(client: PoolClient, { issueId, programmeId }: Returned): Promise<void> {
  await client.query(`
    insert into next_moves (programme_id, issue_id, party_id, ask, cause)
    select programme_id, issue_id, party_id, $2, cause from next_moves where issue_id = $1 order by since desc limit 1`, [issueId, ASK]);
  const eventId = crypto.randomUUID();
  await client.query(`insert into events (id, programme_id, issue_id, kind, text) values ($1, $2, $3, 'stage', $4)`, [eventId, programmeId, issueId, TEXT]);
  await client.query(`insert into live_events (programme_id, issue_id, topic) values ($1, $2, 'issue')`, [programmeId, issueId]);
  await client.query(`
    insert into outbox (person_id, programme_id, issue_id, event_id, kind, message_id)
    select reader, $2, $1, $3, 'stage', gen_random_uuid()::text from access.mail_readers($1, 'stage', null) reader`, [issueId, programmeId, eventId]);
}
