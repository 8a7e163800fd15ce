import type { PoolClient } from 'pg';
import type { Hint } from '#shared/decode';
import type { Claimed } from './decode-records.js';

interface Kept { id: string; code: string; side: string }

/**
 * Stores a decode's hints in their order. A decode that runs again keeps the hints that it finds
 * again, with what engineers said of them; those that it finds no more go.
 */
export async function keepHints(client: PoolClient, claimed: Claimed, hints: readonly Hint[]): Promise<void> {
  const { rows: earlier } = await client.query<Kept>('select id, code, side from hints where decode_id = $1 order by rank', [claimed.id]);
  const matched = hints.map((hint) => take(earlier, hint));
  if (earlier.length > 0) await client.query('delete from hints where id = any($1)', [earlier.map(({ id }) => id)]);
  // Ranks are unique in a decode: the kept ones make room before they are numbered anew.
  await client.query('update hints set rank = rank + 1000 where decode_id = $1', [claimed.id]);
  for (const [rank, { code, side, confidence }] of hints.entries()) {
    if (matched[rank]) await client.query('update hints set rank = $2, confidence = $3 where id = $1', [matched[rank], rank, confidence]);
    else await client.query('insert into hints (decode_id, programme_id, issue_id, rank, code, side, confidence) values ($1, $2, $3, $4, $5, $6, $7)', [claimed.id, claimed.programmeId, claimed.issueId, rank, code, side, confidence]);
  }
}

/** Takes the earlier hint of the same code and side out of the list; null where there is none. */
function take(earlier: Kept[], { code, side }: Hint): string | null {
  const at = earlier.findIndex((each) => each.code === code && each.side === side);
  return at < 0 ? null : earlier.splice(at, 1)[0].id;
}
