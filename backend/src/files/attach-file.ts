import { invalid, notFound, Refusal } from '../http/problems.js';
import type { Services } from '../http/services.js';

/** Files a draft with an issue (and an entry). Only its uploader can, and only once. */
export async function attachFile(services: Services, to: { issueId: string; fileId: string; entryId?: string; side?: 'a' | 'b' }): Promise<void> {
  const draft = await services.database.row<{ attached: boolean; companionId: string | null }>(
    'select issue_id is not null as attached, companion_id as "companionId" from files where id = $1', [to.fileId]);
  if (!draft) throw notFound();
  if (draft.attached) throw new Refusal(409, 'filed-already', 'Filed already', 'This file stands on an issue already. Upload it again to file it elsewhere.');
  await refuseAbsentOwner(services, to);
  await services.database.change('update files set issue_id = $2, entry_id = $3, side = coalesce($4, side) where id = $1', [to.fileId, to.issueId, to.entryId ?? null, to.side ?? null]);
  // The data of a SigMF pair goes where its metadata goes, and a glossary with its snapshot.
  if (draft.companionId) await services.database.change('update files set issue_id = $2, entry_id = $3, side = coalesce($4, side) where id = $1 and issue_id is null', [draft.companionId, to.issueId, to.entryId ?? null, to.side ?? null]);
}

/** Its owner reads a filed file: a party that is not on the issue would read of what it cannot see. */
async function refuseAbsentOwner(services: Services, { issueId, fileId }: { issueId: string; fileId: string }): Promise<void> {
  const owner = await services.database.row<{ name: string; stands: boolean }>(`
    select p.name, p.id = f.uploader_party_id or exists (select 1 from shares s where s.issue_id = $2 and s.party_id = p.id) as stands
    from files f join parties p on p.id = f.party_id where f.id = $1`, [fileId, issueId]);
  if (owner && !owner.stands) throw invalid('fileIds', `this file is said to be ${owner.name}'s, and ${owner.name} is not on the issue; share the issue first or send the file again as another's`);
}
