import type { History } from '#shared/api/thread';
import { may } from '../access/policy.js';
import { idParam, onIssue } from '../access/rules.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import type { Services } from '../http/services.js';
import { changeEntry, entriesOn, versionsOf, withdrawEntry, writeEntry } from './thread.js';

export const threadEndpoints: Mounted[] = [
  endpoint('listEntries', onIssue('read'), async ({ services, caller, granted }) => ({
    items: await entriesOn(services, caller, granted), actions: { write: may(granted.standing.role, 'write-entry') },
  })),
  endpoint('writeEntry', onIssue('write-entry'), ({ services, caller, body, granted }) => writeEntry(services, caller, { issue: granted, entry: body })),
  endpoint('changeEntry', onIssue('write-entry'), ({ services, caller, body, granted, params }) =>
    changeEntry(services, caller, { issue: granted, entryId: idParam(params, 'entryId'), body: body.body })),
  endpoint('withdrawEntry', onIssue('write-entry'), ({ services, caller, granted, params }) =>
    withdrawEntry(services, caller, { issue: granted, entryId: idParam(params, 'entryId') })),
  endpoint('listEntryVersions', onIssue('read'), async ({ services, granted, params }) => ({ items: await versionsOf(services, granted, idParam(params, 'entryId')) })),
  endpoint('readHistory', onIssue('read'), async ({ services, granted }) => ({ items: await historyOf(services, granted.issueId) })),
];

async function historyOf(services: Services, issueId: string): Promise<History['items']> {
  const rows = await services.database.rows<Omit<History['items'][number], 'at'> & { at: Date }>(
    'select id, at, person_name as person, party_name as party, kind, text, side from events where issue_id = $1 order by at desc, id limit 500', [issueId]);
  return rows.map(({ at, ...row }) => ({ ...row, at: at.toISOString() }));
}
