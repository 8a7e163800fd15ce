import { writeAudit } from '../access/audit.js';
import { idParam, standingIn, type Rule, type Standing } from '../access/rules.js';
import { may, type Action } from '../access/policy.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { conflict, forbidden, notFound } from '../http/problems.js';
import type { Services } from '../http/services.js';
import { recordEvent } from '../issues/record.js';
import type { StoredFile } from '#shared/api/files';
import { fileById } from './file-queries.js';
import type { Storage } from './storage.js';

interface GrantedFile { file: StoredFile; issueId: string | null; standing: Standing }

/** A file that exists for the caller, with the right to the action. */
function onFile(action: Action): Rule<GrantedFile> {
  return async ({ services, params }) => {
    const id = idParam(params, 'fileId');
    const row = await services.database.row<{ programmeId: string; issueId: string | null }>('select programme_id as "programmeId", issue_id as "issueId" from files where id = $1', [id]);
    if (!row) throw notFound();
    const standing = await standingIn(services, row.programmeId, action);
    const file = await fileById(services, id, may(standing.role, 'upload-file'));
    if (!file) throw notFound();
    return { file, issueId: row.issueId, standing };
  };
}

export function fileEndpoints(storage: Storage): Mounted[] {
  return [
    endpoint('readFile', onFile('read'), async ({ granted }) => granted.file),

    endpoint('changeFile', onFile('upload-file'), async ({ services, caller, body, granted }) => {
      const { file, issueId, standing } = granted;
      if (!file.actions.narrow.includes(body.reach)) throw forbidden('A reach can only be narrowed, and by the party whose file it is.');
      const done = await services.database.row<{ narrowed: boolean }>('select access.narrow_file($1, $2) as narrowed', [file.id, body.reach]);
      if (!done?.narrowed) throw conflict('Somebody changed this file while you read it. Read it again, then narrow it.');
      await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: file.owner.id, action: 'narrow-file', object: `${file.kind} ${file.name}`, detail: `from ${file.reach} to ${body.reach}` });
      if (issueId) await recordEvent(services, { caller, standing }, { issueId, programmeId: standing.programmeId, kind: 'file', text: `narrowed the reach of a ${file.kind}` });
      const after = await fileById(services, file.id, true);
      if (!after) throw notFound();
      return after;
    }),

    endpoint('withdrawFile', onFile('upload-file'), async ({ services, caller, granted, afterwards }) => {
      const { file, issueId, standing } = granted;
      if (!file.actions.withdraw) throw forbidden('A file is withdrawn by the party whose file it is.');
      const gone = issueId === null ? await dropDraft(services, file.id) : await withdrawFiled(services, file.id);
      if (gone.length === 0) throw conflict('Somebody changed this file while you read it. Read it again.');
      if (issueId !== null) await recordEvent(services, { caller, standing }, { issueId, programmeId: standing.programmeId, kind: 'file', text: `withdrew a ${file.kind}`, onlyMyParty: file.reach === 'my-party' });
      await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: file.owner.id, action: 'withdraw-file', object: `${file.kind} ${file.name}` });
      // The bytes go once the record of it stands; the worker removes what a stop leaves here.
      afterwards(async () => {
        for (const storageId of gone) await storage.remove(storageId);
      });
    }),
  ];
}

/** A draft goes whole, with what was sent to be read beside it and is beside nothing else. */
async function dropDraft(services: Services, fileId: string): Promise<string[]> {
  const rows = await services.database.rows<{ storageId: string }>(`
    delete from files f where f.issue_id is null and (f.id = $1 or f.companion_id = $1
      or f.id = (select o.companion_id from files o where o.id = $1) and not exists (select 1 from files x where x.companion_id = f.id and x.id <> $1))
    returning f.storage_id as "storageId"`, [fileId]);
  return rows.map(({ storageId }) => storageId);
}

async function withdrawFiled(services: Services, fileId: string): Promise<string[]> {
  const rows = await services.database.rows<{ storageId: string }>('select access.withdraw_file($1) as "storageId"', [fileId]);
  return rows.map(({ storageId }) => storageId);
}
