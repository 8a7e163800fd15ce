import { notFound, Refusal } from '../http/problems.js';
import type { Services } from '../http/services.js';

/** Files a draft with an issue (and an entry). Only its uploader can, and only once. */
export async function attachFile(services: Services, to: { issueId: string; fileId: string; entryId?: string; side?: 'a' | 'b' }): Promise<void> {
  const draft = await services.database.row<{ attached: boolean; companionId: string | null }>(
    'select issue_id is not null as attached, companion_id as "companionId" from files where id = $1', [to.fileId]);
  if (!draft) throw notFound();
  if (draft.attached) throw new Refusal(409, 'filed-already', 'Filed already', 'This file stands on an issue already. Upload it again to file it elsewhere.');
  await services.database.change('update files set issue_id = $2, entry_id = $3, side = coalesce($4, side) where id = $1', [to.fileId, to.issueId, to.entryId ?? null, to.side ?? null]);
  // The data of a SigMF pair goes where its metadata goes, and a glossary with its snapshot.
  if (draft.companionId) await services.database.change('update files set issue_id = $2, entry_id = $3, side = coalesce($4, side) where id = $1 and issue_id is null', [draft.companionId, to.issueId, to.entryId ?? null, to.side ?? null]);
}
