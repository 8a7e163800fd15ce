import type { Pool } from 'pg';
import type { Storage } from './storage.js';

const BATCH = 100;

/** Removes bytes whose file has been dropped or withdrawn, where that has not been done yet. Answers how many. */
export async function removeDiscarded(pool: Pool, storage: Pick<Storage, 'remove'>): Promise<number> {
  const { rows } = await pool.query<{ storageId: string }>('select storage_id as "storageId" from discarded_bytes order by at limit $1', [BATCH]);
  for (const { storageId } of rows) {
    // The note goes after the bytes, so that a stop in between repeats the removal and loses none.
    await storage.remove(storageId);
    await pool.query('delete from discarded_bytes where storage_id = $1', [storageId]);
  }
  return rows.length;
}

/** Drops files that were sent a day ago and filed nowhere; their bytes follow through `removeDiscarded`. */
export async function dropForgottenDrafts(pool: Pool): Promise<number> {
  const { rowCount } = await pool.query(`
    delete from files f where f.issue_id is null and f.uploaded_at < now() - interval '1 day'
      and not exists (select 1 from files o where o.companion_id = f.id and (o.issue_id is not null or o.uploaded_at >= now() - interval '1 day'))`);
  return rowCount ?? 0;
}
