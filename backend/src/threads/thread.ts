import type { Entry, NewEntry } from '#shared/api/thread';
import { may } from '../access/policy.js';
import type { GrantedIssue } from '../access/rules.js';
import { attachFile } from '../files/attach-file.js';
import { forbidden, invalid, notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { queueMail, recordEvent } from '../issues/record.js';

interface Row {
  id: string; authorId: string; authorName: string; partyId: string; partyName: string; partyShort: string;
  at: Date; editedAt: Date | null; withdrawnAt: Date | null; body: string; reach: 'everyone' | 'my-party'; versions: number;
  files: { id: string; name: string; size: number }[];
}

const ENTRY = `
  select e.id, e.author_id as "authorId", e.author_name as "authorName", e.author_party_id as "partyId", e.author_party_name as "partyName",
    coalesce(p.short_name, e.author_party_name) as "partyShort", e.at, e.edited_at as "editedAt", e.withdrawn_at as "withdrawnAt", e.body, e.reach,
    (select count(*)::integer from entry_versions v where v.entry_id = e.id) as versions,
    coalesce((select json_agg(json_build_object('id', f.id, 'name', f.name, 'size', f.size) order by f.uploaded_at) from files f where f.entry_id = e.id and f.withdrawn_at is null), '[]') as files
  from entries e left join parties p on p.id = e.author_party_id`;

function shape(row: Row, issue: GrantedIssue, caller: Caller): Entry {
  const mine = row.authorId === caller.personId && row.withdrawnAt === null && may(issue.standing.role, 'write-entry');
  return {
    id: row.id, author: { id: row.authorId, name: row.authorName, party: { id: row.partyId, name: row.partyName, shortName: row.partyShort } },
    standing: row.partyId === issue.partyAId ? 'a' : row.partyId === issue.partyBId ? 'b' : 'lab',
    at: row.at.toISOString(), editedAt: row.editedAt?.toISOString() ?? null, withdrawnAt: row.withdrawnAt?.toISOString() ?? null,
    body: row.body, reach: row.reach, files: row.files, versions: row.versions, actions: { edit: mine, withdraw: mine },
  };
}

export async function entriesOn(services: Services, caller: Caller, issue: GrantedIssue): Promise<Entry[]> {
  const rows = await services.database.rows<Row>(`${ENTRY} where e.issue_id = $1 order by e.at, e.id`, [issue.issueId]);
  return rows.map((row) => shape(row, issue, caller));
}

async function entryOf(services: Services, issue: GrantedIssue, entryId: string): Promise<Row> {
  const row = await services.database.row<Row>(`${ENTRY} where e.id = $1 and e.issue_id = $2`, [entryId, issue.issueId]);
  if (!row) throw notFound();
  return row;
}

export async function writeEntry(services: Services, caller: Caller, { issue, entry }: { issue: GrantedIssue; entry: NewEntry }): Promise<Entry> {
  const id = crypto.randomUUID();
  const { standing } = issue;
  await services.database.change(`
    insert into entries (id, programme_id, issue_id, author_id, author_name, author_party_id, author_party_name, body, reach)
    values ($1, $2, $3, access.person(), $4, $5, $6, $7, $8)`,
  [id, standing.programmeId, issue.issueId, caller.name, standing.partyId, standing.partyName, entry.body, entry.reach]);
  for (const fileId of new Set(entry.fileIds)) {
    if (entry.reach === 'my-party') await refuseWiderFile(services, fileId);
    await attachFile(services, { issueId: issue.issueId, fileId, entryId: id });
  }
  const onlyMyParty = entry.reach === 'my-party';
  const eventId = await recordEvent(services, { caller, standing }, { issueId: issue.issueId, programmeId: standing.programmeId, kind: 'entry', text: 'wrote in the thread', onlyMyParty });
  await services.database.change('insert into followers (issue_id, programme_id, person_id, party_id) values ($1, $2, access.person(), $3) on conflict do nothing', [issue.issueId, standing.programmeId, standing.partyId]);
  await queueMail(services, { issueId: issue.issueId, kind: 'entry', eventId, entryId: id });
  return shape(await entryOf(services, issue, id), issue, caller);
}

/** A file in an entry for my party only must not itself reach further. */
async function refuseWiderFile(services: Services, fileId: string): Promise<void> {
  const file = await services.database.row<{ reach: string }>('select reach from files where id = $1', [fileId]);
  if (file && file.reach !== 'my-party') throw invalid('fileIds', 'a file in an entry for your party only must be for your party only too');
}

export async function changeEntry(services: Services, caller: Caller, { issue, entryId, body }: { issue: GrantedIssue; entryId: string; body: string }): Promise<Entry> {
  const before = await entryOf(services, issue, entryId);
  refuseOthers(before, caller);
  if (before.body !== body) {
    await services.database.change('insert into entry_versions (entry_id, programme_id, body, at) values ($1, $2, $3, $4)', [entryId, issue.standing.programmeId, before.body, before.editedAt ?? before.at]);
    await services.database.change('update entries set body = $2, edited_at = now() where id = $1', [entryId, body]);
    await recordEvent(services, { caller, standing: issue.standing }, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'entry', text: 'edited an entry of the thread', onlyMyParty: before.reach === 'my-party' });
  }
  return shape(await entryOf(services, issue, entryId), issue, caller);
}

/** The words go, with those of earlier versions; that there was an entry stays. */
export async function withdrawEntry(services: Services, caller: Caller, { issue, entryId }: { issue: GrantedIssue; entryId: string }): Promise<void> {
  const before = await entryOf(services, issue, entryId);
  refuseOthers(before, caller);
  await services.database.change('delete from entry_versions where entry_id = $1', [entryId]);
  await services.database.change("update entries set body = '', withdrawn_at = now() where id = $1", [entryId]);
  await recordEvent(services, { caller, standing: issue.standing }, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'entry', text: 'withdrew an entry of the thread', onlyMyParty: before.reach === 'my-party' });
}

function refuseOthers(entry: Row, caller: Caller): void {
  if (entry.authorId !== caller.personId) throw forbidden('An entry is changed by the one who wrote it.');
  if (entry.withdrawnAt) throw forbidden('This entry has been withdrawn.');
}

export async function versionsOf(services: Services, issue: GrantedIssue, entryId: string): Promise<{ body: string; at: string }[]> {
  await entryOf(services, issue, entryId);
  const rows = await services.database.rows<{ body: string; at: Date }>('select body, at from entry_versions where entry_id = $1 order by at', [entryId]);
  return rows.map(({ body, at }) => ({ body, at: at.toISOString() }));
}
