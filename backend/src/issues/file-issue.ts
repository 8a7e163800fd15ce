import type { NewIssue } from '#shared/api/issues';
import type { LinkInterface } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import { standingIn, type Standing } from '../access/rules.js';
import { enqueueDecode } from '../decodes/request-decode.js';
import { attachFile } from '../files/attach-file.js';
import { invalid, notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { setNextMove } from '../moves/next-move.js';
import { drawNumber } from './number.js';
import { queueMail, recordEvent } from './record.js';
import { refuseUnknownRungs } from './rungs.js';

interface LinkRow { id: string; programmeId: string; interface: LinkInterface; name: string; partyAId: string; partyBId: string; unitAId: string; unitBId: string }

/** Files an issue, in one transaction: the issue, its files, the first decode, the next move, the mail. */
export async function fileIssue(services: Services, caller: Caller, issue: NewIssue): Promise<{ programme: string; number: string }> {
  // Sent twice at once, the second waits for the first and answers the same.
  await services.database.rows("select pg_advisory_xact_lock(hashtextextended('crosstie.file.' || $1, 0))", [issue.fileKey]);
  const earlier = await services.database.row<{ programme: string; number: string }>(
    'select g.code as programme, i.number from issues i join programmes g on g.id = i.programme_id where i.raised_by = access.person() and i.file_key = $1', [issue.fileKey]);
  if (earlier) return earlier;
  const link = await linkOf(services, issue.linkId);
  const standing = await standingIn(services, link.programmeId, 'file-issue');
  refuseUnknownRungs(issue.lastRung, link.interface);
  await refuseForeignBuilds(services, issue, link);
  const by = { caller, standing };
  const filed = await insertIssue(services, by, { issue, link });
  await attachAll(services, filed.id, issue);
  const eventId = await recordEvent(services, by, { issueId: filed.id, programmeId: link.programmeId, kind: 'filed', text: `filed the issue on ${link.name}` });
  await setNextMove(services, by, { issueId: filed.id, programmeId: link.programmeId, partyAId: link.partyAId, partyBId: link.partyBId, move: issue.nextMove ?? firstMove(standing, link), withoutLetter: true });
  await services.database.change('insert into followers (issue_id, programme_id, person_id, party_id) values ($1, $2, access.person(), $3)', [filed.id, link.programmeId, standing.partyId]);
  if (issue.captureFileId || issue.snapshotAFileId || issue.snapshotBFileId) {
    await enqueueDecode(services, by, { issueId: filed.id, programmeId: link.programmeId, inputs: issue });
  }
  await queueMail(services, { issueId: filed.id, kind: 'filed', eventId });
  await writeAudit(services, caller, { programmeId: link.programmeId, partyId: standing.partyId, action: 'file-issue', object: `${standing.programmeCode}/${filed.number}` });
  return { programme: standing.programmeCode, number: filed.number };
}

async function linkOf(services: Services, linkId: string): Promise<LinkRow> {
  const link = await services.database.row<LinkRow>(`
    select id, programme_id as "programmeId", interface, name, party_a_id as "partyAId", party_b_id as "partyBId", unit_a_id as "unitAId", unit_b_id as "unitBId" from links where id = $1`, [linkId]);
  if (!link) throw notFound();
  return link;
}

async function refuseForeignBuilds(services: Services, issue: NewIssue, link: LinkRow): Promise<void> {
  for (const [field, buildId, unitId] of [['buildAId', issue.buildAId, link.unitAId], ['buildBId', issue.buildBId, link.unitBId]] as const) {
    if (buildId && !await services.database.row('select 1 as found from builds where id = $1 and unit_id = $2', [buildId, unitId])) {
      throw invalid(field, 'this build is not one of the unit on that side of the link');
    }
  }
}

async function insertIssue(services: Services, by: { caller: Caller; standing: Standing }, { issue, link }: { issue: NewIssue; link: LinkRow }): Promise<{ id: string; number: string }> {
  const id = crypto.randomUUID();
  const number = await drawNumber(services, link.programmeId);
  const partyIds = [...new Set([link.partyAId, link.partyBId, by.standing.partyId, ...issue.shareWithPartyIds])];
  const known = await services.database.rows('select id from parties where id = any($1) and programme_id = $2', [partyIds, link.programmeId]);
  if (known.length !== partyIds.length) throw notFound();
  await services.database.change(`
    insert into issues (id, programme_id, number, link_id, party_ids, title, description, severity, build_a_id, build_b_id, transmitter,
      rung_downlink, rung_uplink, signal_path, baseline, raised_by, raised_by_name, raised_by_party_id, file_key)
    values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, access.person(), $16, $17, $18)`,
  [id, link.programmeId, number, link.id, partyIds, issue.title, issue.description, issue.severity, issue.buildAId, issue.buildBId, issue.transmitter,
    issue.lastRung.downlink, issue.lastRung.uplink, JSON.stringify(issue.signalPath), issue.baseline, by.caller.name, by.standing.partyId, issue.fileKey]);
  return { id, number };
}

async function attachAll(services: Services, issueId: string, issue: NewIssue): Promise<void> {
  if (issue.snapshotAFileId) await attachFile(services, { issueId, fileId: issue.snapshotAFileId, side: 'a' });
  if (issue.snapshotBFileId) await attachFile(services, { issueId, fileId: issue.snapshotBFileId, side: 'b' });
  const named = [issue.captureFileId, ...issue.fileIds].filter((id): id is string => id !== null);
  for (const fileId of new Set(named)) {
    if (fileId !== issue.snapshotAFileId && fileId !== issue.snapshotBFileId) await attachFile(services, { issueId, fileId });
  }
}

/** Until somebody says otherwise the other end is asked; the lab asks side A first. */
function firstMove(standing: Standing, link: LinkRow) {
  const partyId = standing.partyId === link.partyAId ? link.partyBId : link.partyAId;
  return { partyId, ask: 'take the issue up and say what the evidence means for your side', due: null };
}
