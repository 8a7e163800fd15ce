import type { NewRetest } from '#shared/api/issues';
import type { LinkInterface } from '#shared/vocabulary';
import type { GrantedIssue } from '../access/rules.js';
import { conflict, forbidden, invalid } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { recordEvent } from '../issues/record.js';
import { refuseUnknownRungs } from '../issues/rungs.js';

/** Records a retest on named builds. A clean one rests on a decode that ran and found nothing. */
export async function recordRetest(services: Services, caller: Caller, { issue, retest }: { issue: GrantedIssue; retest: NewRetest }): Promise<void> {
  if (retest.version !== issue.version) throw conflict('Somebody changed this issue while you read it. Read it again, then record the retest.');
  if (issue.stage !== 'under-retest') throw forbidden('A retest is recorded while the issue is under retest.');
  if (!issue.standing.isLab) throw forbidden('Retests are recorded by the test lab.');
  await refuseForeignBuilds(services, issue, retest);
  if (retest.outcome === 'clean') await requireCleanDecode(services, issue, retest.decodeId);
  await services.database.change(`
    insert into retests (programme_id, issue_id, decode_id, build_a_id, build_b_id, outcome, note, rung_downlink, rung_uplink, recorded_by, recorded_by_name)
    values ($1, $2, $3, $4, $5, $6, $7, $8, $9, access.person(), $10)`,
  [issue.standing.programmeId, issue.issueId, retest.decodeId, retest.buildAId, retest.buildBId, retest.outcome, retest.note, retest.lastRung.downlink, retest.lastRung.uplink, caller.name]);
  const done = await services.database.change(`
    update issues set rung_downlink = coalesce($2, rung_downlink), rung_uplink = coalesce($3, rung_uplink), build_a_id = $4, build_b_id = $5, version = version + 1 where id = $1 and version = $6`,
  [issue.issueId, retest.lastRung.downlink, retest.lastRung.uplink, retest.buildAId, retest.buildBId, issue.version]);
  if (done === 0) throw conflict('Somebody changed this issue while you read it. Read it again, then record the retest.');
  await recordEvent(services, { caller, standing: issue.standing }, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'retest', text: `recorded a ${retest.outcome} retest${retest.note ? `: ${retest.note}` : ''}` });
}

/** How the last retest since the stage began went; null where none was recorded since. */
export async function freshOutcome(services: Services, issueId: string): Promise<'clean' | 'failed' | null> {
  const latest = await services.database.row<{ outcome: 'clean' | 'failed' }>(`
    select r.outcome from retests r where r.issue_id = $1
      and r.at >= (select since from stage_intervals where issue_id = $1 and ended_at is null)
    order by r.at desc limit 1`, [issueId]);
  return latest?.outcome ?? null;
}

/** A retest is of the link's own two units, each on a build of its own. */
async function refuseForeignBuilds(services: Services, issue: GrantedIssue, retest: NewRetest): Promise<void> {
  const link = await services.database.row<{ a: boolean; b: boolean; on: LinkInterface }>(`
    select exists (select 1 from builds x where x.id = $2 and x.unit_id = l.unit_a_id) as a, exists (select 1 from builds x where x.id = $3 and x.unit_id = l.unit_b_id) as b, l.interface as on
    from links l where l.id = $1`, [issue.linkId, retest.buildAId, retest.buildBId]);
  if (!link?.a) throw invalid('buildAId', 'this build is not one of the unit on side A');
  if (!link.b) throw invalid('buildBId', 'this build is not one of the unit on side B');
  refuseUnknownRungs(retest.lastRung, link.on);
}

async function requireCleanDecode(services: Services, issue: GrantedIssue, decodeId: string | null): Promise<void> {
  if (!decodeId) throw invalid('decodeId', 'a clean retest needs the decode of its capture');
  const decode = await services.database.row<{ state: string; hints: number; hasCapture: boolean; fresh: boolean }>(`
    select d.state, (select count(*)::integer from hints h where h.decode_id = d.id) as hints,
      exists (select 1 from decode_inputs n where n.decode_id = d.id and n.role = 'capture') as "hasCapture",
      d.queued_at >= (select since from stage_intervals where issue_id = d.issue_id and ended_at is null) as fresh
    from decodes d where d.id = $1 and d.issue_id = $2 and not d.input_withdrawn`, [decodeId, issue.issueId]);
  if (!decode) throw invalid('decodeId', 'there is no such decode on this issue');
  if (decode.state !== 'done') throw invalid('decodeId', 'that decode has not finished');
  if (!decode.hasCapture) throw invalid('decodeId', 'that decode looked at no capture');
  if (!decode.fresh) throw invalid('decodeId', 'that decode is older than the retest; decode the capture taken now');
  if (decode.hints > 0) throw invalid('decodeId', `that decode still finds ${decode.hints === 1 ? 'a mismatch' : `${decode.hints} mismatches`}`);
}
