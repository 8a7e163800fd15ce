import { writeAudit } from '../access/audit.js';
import { idParam, onIssue, signedIn } from '../access/rules.js';
import { attachFile } from '../files/attach-file.js';
import { endpoint, question, type Mounted } from '../http/endpoint.js';
import { conflict, notFound } from '../http/problems.js';
import { moveIssue, signWaiver, target } from '../moves/move-issue.js';
import { setNextMove } from '../moves/next-move.js';
import { recordRetest } from '../moves/retest.js';
import { changeIssue } from './change-issue.js';
import { fileIssue } from './file-issue.js';
import { readIssue } from './read-issue.js';
import { recordEvent } from './record.js';
import { registerCounts, registerPage } from './register-repository.js';

export const issueEndpoints: Mounted[] = [
  question('listIssues', ({ services, caller, query }) => registerPage(services, caller.personId, query)),
  question('countIssues', ({ services, caller, query }) => registerCounts(services, caller.personId, query)),
  endpoint('fileIssue', signedIn, ({ services, caller, body }) => fileIssue(services, caller, body)),
  endpoint('readIssue', onIssue('read'), ({ services, granted }) => readIssue(services, granted)),

  endpoint('changeIssue', onIssue('change-severity'), async ({ services, caller, body, granted }) => {
    await changeIssue(services, caller, { issue: granted, change: body });
    return readIssue(services, granted);
  }),
  endpoint('moveIssue', onIssue('move-issue'), async ({ services, caller, body, granted, params }) => {
    await moveIssue({ services, caller, issue: granted, asked: body });
    return readIssue(services, await onIssue('read')({ services, caller, params }));
  }),
  endpoint('setNextMove', onIssue('set-next-move'), async ({ services, caller, body, granted }) => {
    const { version, ...move } = body;
    if (['settled', 'waived', 'withdrawn'].includes(granted.stage)) throw conflict('This issue has ended; nobody has a next move.');
    // Whoever asks read the issue as it stands: two that ask at once do not both get their way.
    const taken = await services.database.change('update issues set version = version + 1 where id = $1 and version = $2', [granted.issueId, version]);
    if (taken === 0) throw conflict('Somebody changed this issue while you read it. Read it again, then set the next move.');
    await setNextMove(services, { caller, standing: granted.standing }, { ...target(granted), move });
    return readIssue(services, granted);
  }),
  endpoint('recordRetest', onIssue('record-retest'), async ({ services, caller, body, granted, params }) => {
    await recordRetest(services, caller, { issue: granted, retest: body });
    return readIssue(services, await onIssue('read')({ services, caller, params }));
  }),
  endpoint('signWaiver', onIssue('move-issue'), async ({ services, caller, granted, params }) => {
    await signWaiver({ services, caller, issue: granted }, idParam(params, 'waiverId'));
    return readIssue(services, await onIssue('read')({ services, caller, params }));
  }),

  endpoint('shareIssue', onIssue('share-issue'), async ({ services, caller, body, granted }) => {
    const party = await services.database.row<{ name: string }>('select name from parties where id = $1 and programme_id = $2', [body.partyId, granted.standing.programmeId]);
    if (!party) throw notFound();
    await services.database.change('insert into shares (programme_id, issue_id, party_id, shared_by) values ($1, $2, $3, access.person())', [granted.standing.programmeId, granted.issueId, body.partyId]);
    await recordEvent(services, { caller, standing: granted.standing }, { issueId: granted.issueId, programmeId: granted.standing.programmeId, kind: 'shared', text: `shared the issue with ${party.name}` });
    await writeAudit(services, caller, { programmeId: granted.standing.programmeId, partyId: null, action: 'share-issue', object: `${granted.standing.programmeCode}/${granted.number}`, detail: `with ${party.name}` });
    return readIssue(services, granted);
  }),
  endpoint('attachFiles', onIssue('upload-file'), async ({ services, caller, body, granted }) => {
    for (const fileId of new Set(body.fileIds)) {
      await attachFile(services, { issueId: granted.issueId, fileId });
      const file = await services.database.row<{ kind: string; reach: string; side: 'a' | 'b' | null }>('select kind, reach, side from files where id = $1', [fileId]);
      // The name of a file may tell what its reach hides, so the history names the kind alone.
      await recordEvent(services, { caller, standing: granted.standing }, {
        issueId: granted.issueId, programmeId: granted.standing.programmeId, kind: 'file', side: file?.side ?? null,
        text: `added a ${file?.kind ?? 'file'}`, onlyMyParty: file?.reach === 'my-party',
      });
    }
    return readIssue(services, granted);
  }),

  endpoint('follow', onIssue('follow'), async ({ services, granted }) => {
    await services.database.change('insert into followers (issue_id, programme_id, person_id, party_id) values ($1, $2, access.person(), $3) on conflict do nothing', [granted.issueId, granted.standing.programmeId, granted.standing.partyId]);
  }),
  endpoint('unfollow', onIssue('follow'), async ({ services, granted }) => {
    await services.database.change('delete from followers where issue_id = $1 and person_id = access.person()', [granted.issueId]);
  }),
  endpoint('lookAtIssue', onIssue('read'), async ({ services, granted }) => {
    await services.database.change('insert into looks (person_id, issue_id) values (access.person(), $1) on conflict (person_id, issue_id) do update set at = now()', [granted.issueId]);
  }),
];
