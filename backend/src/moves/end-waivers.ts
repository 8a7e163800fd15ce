import type { Pool } from 'pg';

/** Waivers whose last day has passed: the issue returns to Cause agreed. Answers how many. */
export async function endWaivers(pool: Pool): Promise<number> {
  const { rows } = await pool.query<{ issueId: string; programmeId: string }>(`
    with ended as (update waivers set returned_at = now() where returned_at is null and ends_on < current_date returning issue_id, programme_id)
    update issues i set stage = 'cause-agreed', version = version + 1, updated_at = now() from ended e
    where i.id = e.issue_id and i.stage = 'waived' returning i.id as "issueId", i.programme_id as "programmeId"`);
  for (const { issueId, programmeId } of rows) {
    await pool.query(`insert into events (programme_id, issue_id, kind, text) values ($1, $2, 'stage', 'the waiver has ended: back to Cause agreed')`, [programmeId, issueId]);
    await pool.query(`insert into live_events (programme_id, issue_id, topic) values ($1, $2, 'issue')`, [programmeId, issueId]);
  }
  return rows.length;
}
