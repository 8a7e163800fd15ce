import type { NewDecode } from '#shared/api/decodes';
import type { Standing } from '../access/rules.js';
import { writeAudit } from '../access/audit.js';
import { invalid, notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { recordEvent } from '../issues/record.js';

interface Wanted { issueId: string; programmeId: string; inputs: Pick<NewDecode, 'captureFileId' | 'snapshotAFileId' | 'snapshotBFileId' | 'transmitter'> }
interface Input { role: 'capture' | 'snapshot-a' | 'snapshot-b'; fileId: string; reach: string; partyId: string | null; side: string | null }

/** Records a decode and its inputs and puts the job in the queue, all in the caller's transaction. */
export async function enqueueDecode(services: Services, by: { caller: Caller; standing: Standing }, { issueId, programmeId, inputs }: Wanted): Promise<string> {
  const files = await inputsOf(services, issueId, inputs);
  if (files.length === 0) throw invalid('captureFileId', 'name at least a capture or one snapshot');
  // Two people may ask at once: each decode gets a number of its own.
  await services.database.rows('select access.lock_issue($1)', [issueId]);
  // What only my party may see makes a decode that only my party may see.
  const onlyMine = files.some(({ reach }) => reach === 'my-party');
  const id = crypto.randomUUID();
  const { database } = services;
  await database.change(`
    insert into decodes (id, programme_id, issue_id, number, reach, party_id, transmitter, requested_by, requested_by_name)
    values ($1, $2, $3, coalesce((select max(number) from decodes where issue_id = $3 and reach = $4::text and ($4::text = 'everyone' or party_id = $5)), 0) + 1, $4, $5, $6, access.person(), $7)`,
  [id, programmeId, issueId, onlyMine ? 'my-party' : 'everyone', by.standing.partyId, inputs.transmitter, by.caller.name]);
  for (const { role, fileId } of files) {
    await database.change('insert into decode_inputs (decode_id, role, programme_id, file_id, sha256) values ($1, $2, $3, $4, repeat(\'0\', 64))', [id, role, programmeId, fileId]);
  }
  await database.rows('select access.enqueue_decode($1)', [id]);
  if (!onlyMine) await database.change("update issues set decode_state = 'running' where id = $1", [issueId]);
  await recordEvent(services, by, { issueId, programmeId, kind: 'decode', text: 'asked for a decode', onlyMyParty: onlyMine });
  await auditComparisons(services, by, { issueId, programmeId, files });
  return id;
}

/** The files by role. A compare-only snapshot of the other side is reached through its veil. */
async function inputsOf(services: Services, issueId: string, inputs: Wanted['inputs']): Promise<Input[]> {
  const roles = [['capture', 'captureFileId'], ['snapshot-a', 'snapshotAFileId'], ['snapshot-b', 'snapshotBFileId']] as const;
  const found: Input[] = [];
  for (const [role, field] of roles) {
    const fileId = inputs[field];
    if (!fileId) continue;
    const file = await services.database.row<{ kind: string; reach: string; partyId: string; side: string | null }>(`
      select kind, reach, party_id as "partyId", side from files where id = $1 and issue_id = $2 and withdrawn_at is null
      union all select 'snapshot', 'compare-only', v.party_id, v.side from access.veiled_snapshots($2) v where v.file_id = $1 limit 1`, [fileId, issueId]);
    if (!file) throw notFound();
    refuseOtherUse(role, field, file);
    found.push({ role, fileId, ...file });
  }
  if (inputs.snapshotAFileId && inputs.snapshotAFileId === inputs.snapshotBFileId) throw invalid('snapshotBFileId', 'a snapshot compared with itself says nothing');
  return found;
}

/** Laid beside itself a compare-only snapshot would be told value by value, and read as samples it would be shown. */
function refuseOtherUse(role: Input['role'], field: string, file: { kind: string; side: string | null }): void {
  if (file.kind !== (role === 'capture' ? 'capture' : 'snapshot')) throw invalid(field, `this file is a ${file.kind}`);
  if (role !== 'capture' && file.side !== null && file.side !== role.slice(-1)) throw invalid(field, `this snapshot was filed as side ${file.side.toUpperCase()}'s`);
}

/** Somebody may probe with invented snapshots: each comparison against a compare-only one stands in its owner's record. */
async function auditComparisons(services: Services, by: { caller: Caller; standing: Standing }, { issueId, programmeId, files }: { issueId: string; programmeId: string; files: Input[] }): Promise<void> {
  const issue = await services.database.row<{ number: string }>('select number from issues where id = $1', [issueId]);
  for (const file of files) {
    if (file.reach !== 'compare-only') continue;
    await writeAudit(services, by.caller, {
      programmeId, partyId: file.partyId, action: 'compare', object: `${by.standing.programmeCode}/${issue?.number ?? ''}`,
      detail: `the compare-only snapshot of side ${file.side?.toUpperCase() ?? '?'} took part in a comparison`,
    });
  }
}
