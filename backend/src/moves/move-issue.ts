import type { NewMove } from '#shared/api/issues';
import { STAGE_LABELS, type Stage } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import type { GrantedIssue } from '../access/rules.js';
import { conflict, forbidden, invalid, notFound, Refusal } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { queueMail, recordEvent } from '../issues/record.js';
import { offersBuildsOf, standingOnLink } from '../issues/standing.js';
import { endNextMove, setNextMove } from './next-move.js';
import { freshOutcome } from './retest.js';
import { movesFrom, type StageMove } from './stage-table.js';

interface Moving { services: Services; caller: Caller; issue: GrantedIssue; asked: NewMove }

/** Moves the stage by the table, checks what the move requires, and says so to everyone on the issue. */
export async function moveIssue(moving: Moving): Promise<void> {
  const { services, caller, issue, asked } = moving;
  if (asked.version !== issue.version) throw conflict('Somebody changed this issue while you read it. Read it again, then move it.');
  const move = movesFrom(issue.stage as Stage, issue.standing.role, standingOnLink(issue)).find(({ to }) => to === asked.to);
  if (!move) throw forbidden(`From ${STAGE_LABELS[issue.stage as Stage]} you cannot move this issue to ${STAGE_LABELS[asked.to]}.`);
  const by = { caller, standing: issue.standing };
  const detail = await requirements(moving, move);
  if (asked.to === 'waived') {
    await askForWaiver(moving);
    if (asked.nextMove) await setNextMove(services, by, { ...target(issue), move: asked.nextMove });
    return;
  }
  await setStage(services, issue, asked.to);
  const eventId = await recordEvent(services, by, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'stage', text: `moved it to ${STAGE_LABELS[asked.to]}${detail}` });
  await queueMail(services, { issueId: issue.issueId, kind: 'stage', eventId });
  if (['settled', 'withdrawn'].includes(asked.to)) await endNextMove(services, issue.issueId);
  else if (asked.nextMove) await setNextMove(services, by, { ...target(issue), move: asked.nextMove });
  await writeAudit(services, caller, { programmeId: issue.standing.programmeId, partyId: issue.standing.partyId, action: 'move-issue', object: `${issue.standing.programmeCode}/${issue.number}`, detail: `to ${asked.to}` });
}

export const target = (issue: GrantedIssue) => ({ issueId: issue.issueId, programmeId: issue.standing.programmeId, partyAId: issue.partyAId, partyBId: issue.partyBId });

/** Sets the stage where nobody else has meanwhile. */
export async function setStage(services: Services, issue: Pick<GrantedIssue, 'issueId' | 'version'>, to: Stage): Promise<void> {
  const moved = await services.database.change(`
    update issues set stage = $2, version = version + 1, updated_at = now(), settled_at = case when $2 = 'settled' then now() end
    where id = $1 and version = $3`, [issue.issueId, to, issue.version]);
  if (moved === 0) throw conflict('Somebody changed this issue while you read it. Read it again, then move it.');
}

/** Checks what the table asks for; answers the words to add to the history. */
async function requirements({ services, issue, asked }: Moving, move: StageMove): Promise<string> {
  if (move.requires.includes('reason') && !asked.reason) throw invalid('reason', 'say why');
  if (move.requires.includes('end-date') && !asked.endsOn) throw invalid('endsOn', 'a waiver needs the day on which it ends');
  if (move.requires.includes('build')) return offerBuild(services, issue, asked);
  if (move.requires.includes('clean-retest')) await requireRetest(services, issue, 'clean');
  if (move.requires.includes('failed-retest')) await requireRetest(services, issue, 'failed');
  return asked.reason ? `: ${asked.reason}` : '';
}

/** The build that is offered becomes the build under test on its side. */
async function offerBuild(services: Services, issue: GrantedIssue, asked: NewMove): Promise<string> {
  if (!asked.buildId) throw invalid('buildId', 'name the build that carries the change');
  const build = await services.database.row<{ label: string; unit: string; side: 'a' | 'b' }>(`
    select b.label, u.name as unit, case when l.unit_a_id = u.id then 'a' else 'b' end as side
    from builds b join units u on u.id = b.unit_id join links l on l.id = $2 and u.id in (l.unit_a_id, l.unit_b_id) where b.id = $1`, [asked.buildId, issue.linkId]);
  if (!build) throw invalid('buildId', 'this build is on neither unit of the link');
  if (!offersBuildsOf(issue).includes(build.side)) throw invalid('buildId', `this build is side ${build.side.toUpperCase()}'s: its own party or the test lab offers it`);
  await services.database.change(`update issues set build_${build.side === 'a' ? 'a' : 'b'}_id = $2 where id = $1`, [issue.issueId, asked.buildId]);
  return ` with build ${build.label} of ${build.unit}${asked.reason ? `: ${asked.reason}` : ''}`;
}

async function requireRetest(services: Services, issue: GrantedIssue, outcome: 'clean' | 'failed'): Promise<void> {
  if (await freshOutcome(services, issue.issueId) !== outcome) {
    throw new Refusal(409, 'retest-first', 'Retest first', outcome === 'clean'
      ? 'Settled needs a clean retest on named builds, recorded since the retest began.'
      : 'Going back needs a failed retest, recorded since the retest began.');
  }
}

/** A waiver takes force when both parties have signed; asking for it signs for the asker's side. */
async function askForWaiver({ services, caller, issue, asked }: Moving): Promise<void> {
  const { database } = services;
  if ((asked.endsOn ?? '') <= services.now().toISOString().slice(0, 10)) throw invalid('endsOn', 'the end must be a day to come');
  const id = crypto.randomUUID();
  await database.change('insert into waivers (id, programme_id, issue_id, reason, ends_on, asked_by) values ($1, $2, $3, $4, $5, access.person())', [id, issue.standing.programmeId, issue.issueId, asked.reason, asked.endsOn]);
  await recordEvent(services, { caller, standing: issue.standing }, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'waiver', text: `asked for a waiver until ${asked.endsOn}: ${asked.reason}` });
  if (isOnASide(issue)) await signWaiver({ services, caller, issue }, id);
  else await askToSign({ services, caller, issue }, { partyId: issue.partyAId, endsOn: asked.endsOn ?? '' });
}

/** A test lab whose own unit is one of the link's ends signs for it like any other party. */
export const isOnASide = ({ standing, partyAId, partyBId }: GrantedIssue) => [partyAId, partyBId].includes(standing.partyId);


/** Everyone waits for the side whose signature the waiver lacks. */
async function askToSign({ services, caller, issue }: Omit<Moving, 'asked'>, { partyId, endsOn }: { partyId: string; endsOn: string }): Promise<void> {
  await setNextMove(services, { caller, standing: issue.standing }, { ...target(issue), move: { partyId, ask: `sign the waiver until ${endsOn}, or say why not`, due: null } });
}

/** One party's signature; with both, the issue is waived. */
export async function signWaiver({ services, caller, issue }: Omit<Moving, 'asked'>, waiverId: string): Promise<void> {
  const { database } = services;
  // Two signatures at the same moment: the second must find the first.
  await database.rows('select access.lock_issue($1)', [issue.issueId]);
  const waiver = await database.row<{ endsOn: string; latest: boolean; signed: boolean }>(`
    select w.ends_on as "endsOn", not exists (select 1 from waivers x where x.issue_id = w.issue_id and x.at > w.at) as latest,
      exists (select 1 from waiver_signatures s where s.waiver_id = w.id and s.party_id = $3) as signed
    from waivers w where w.id = $1 and w.issue_id = $2 and w.returned_at is null`, [waiverId, issue.issueId, issue.standing.partyId]);
  if (!waiver) throw notFound();
  if (!isOnASide(issue)) throw forbidden('A waiver is signed by the two parties of the link.');
  if (!waiver.latest) throw conflict('Another waiver has been asked for since. Read the issue again and sign that one.');
  if (waiver.signed) throw conflict('Your party has signed this waiver already.');
  if (['settled', 'waived', 'withdrawn'].includes(issue.stage)) throw conflict('This issue has ended; there is nothing to waive.');
  await database.change('insert into waiver_signatures (waiver_id, party_id, programme_id, person_id, person_name) values ($1, $2, $3, access.person(), $4)', [waiverId, issue.standing.partyId, issue.standing.programmeId, caller.name]);
  const by = { caller, standing: issue.standing };
  await recordEvent(services, by, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'waiver', text: `signed the waiver until ${waiver.endsOn} for ${issue.standing.partyName}` });
  const signed = await database.row<{ both: boolean }>(`
    select count(distinct s.party_id) = (select count(distinct p) from unnest(array[$2, $3]::uuid[]) p) as both from waiver_signatures s where s.waiver_id = $1 and s.party_id in ($2, $3)`, [waiverId, issue.partyAId, issue.partyBId]);
  if (!signed?.both) {
    const partyId = [issue.partyAId, issue.partyBId].find((id) => id !== issue.standing.partyId) ?? issue.partyBId;
    await askToSign({ services, caller, issue }, { partyId, endsOn: waiver.endsOn });
    return;
  }
  await setStage(services, issue, 'waived');
  await endNextMove(services, issue.issueId);
  const eventId = await recordEvent(services, by, { issueId: issue.issueId, programmeId: issue.standing.programmeId, kind: 'stage', text: `moved it to ${STAGE_LABELS.waived}: both parties have signed` });
  await queueMail(services, { issueId: issue.issueId, kind: 'stage', eventId });
}
