import { writeAudit } from '../access/audit.js';
import { idParam, standingIn, type Rule, type Standing } from '../access/rules.js';
import { may, type Action } from '../access/policy.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { forbidden, notFound } from '../http/problems.js';
import { recordEvent } from '../issues/record.js';
import type { StoredFile } from '#shared/api/files';
import { fileById } from './file-queries.js';
import type { Storage } from './storage.js';

interface GrantedFile { file: StoredFile; issueId: string | null; storageId: string; standing: Standing }

/** A file that exists for the caller, with the right to the action. */
function onFile(action: Action): Rule<GrantedFile> {
  return async ({ services, params }) => {
    const id = idParam(params, 'fileId');
    const row = await services.database.row<{ programmeId: string; issueId: string | null; storageId: string }>('select programme_id as "programmeId", issue_id as "issueId", storage_id as "storageId" from files where id = $1', [id]);
    if (!row) throw notFound();
    const standing = await standingIn(services, row.programmeId, action);
    const file = await fileById(services, id, may(standing.role, 'upload-file'));
    if (!file) throw notFound();
    return { file, issueId: row.issueId, storageId: row.storageId, standing };
  };
}

export function fileEndpoints(storage: Storage): Mounted[] {
  return [
    endpoint('readFile', onFile('read'), async ({ granted }) => granted.file),

    endpoint('changeFile', onFile('upload-file'), async ({ services, caller, body, granted }) => {
      const { file, issueId, standing } = granted;
      if (!file.actions.narrow.includes(body.reach)) throw forbidden('A reach can only be narrowed, and by the party whose file it is.');
      await services.database.rows('select access.narrow_file($1, $2)', [file.id, body.reach]);
      await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: file.owner.id, action: 'narrow-file', object: `${file.kind} ${file.name}`, detail: `from ${file.reach} to ${body.reach}` });
      if (issueId) await recordEvent(services, { caller, standing }, { issueId, programmeId: standing.programmeId, kind: 'file', text: `narrowed the reach of a ${file.kind}` });
      const after = await fileById(services, file.id, true);
      if (!after) throw notFound();
      return after;
    }),

    endpoint('withdrawFile', onFile('upload-file'), async ({ services, caller, granted }) => {
      const { file, issueId, storageId, standing } = granted;
      if (!file.actions.withdraw) throw forbidden('A file is withdrawn by the party whose file it is.');
      if (issueId === null) await services.database.change('delete from files where id = $1 and issue_id is null', [file.id]);
      else {
        await services.database.rows('select access.withdraw_file($1)', [file.id]);
        await recordEvent(services, { caller, standing }, { issueId, programmeId: standing.programmeId, kind: 'file', text: `withdrew a ${file.kind}`, onlyMyParty: file.reach === 'my-party' });
      }
      await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: file.owner.id, action: 'withdraw-file', object: `${file.kind} ${file.name}` });
      await storage.remove(storageId);
    }),
  ];
}
