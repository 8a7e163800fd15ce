import type { Issue, PossibleMove } from '#shared/api/issues';
import { may } from '../access/policy.js';
import type { GrantedIssue } from '../access/rules.js';
import { decodesOf, hintsOf, resultFor } from '../decodes/decode-queries.js';
import { filesOn, veiledOn } from '../files/file-queries.js';
import { notFound } from '../http/problems.js';
import type { Services } from '../http/services.js';
import { isOnASide } from '../moves/move-issue.js';
import { freshOutcome } from '../moves/retest.js';
import { movesFrom } from '../moves/stage-table.js';
import { currentMove, followingOf, issueRow, partiesOn, retestsOf, waitedByCause, waiverOf, type IssueRow } from './issue-queries.js';
import { mayChange, offersBuildsOf, standingOnLink } from './standing.js';

const NO_PATH = { path: null, attenuationDb: null, levelDbm: null, clockSource: null, lateCounters: null };

/** The whole issue as its reader may see it, with the actions that the reader may take. */
export async function readIssue(services: Services, issue: GrantedIssue): Promise<Issue> {
  const row = await issueRow(services, issue.issueId);
  if (!row) throw notFound();
  const { role } = issue.standing;
  const open = !['settled', 'waived', 'withdrawn'].includes(row.stage);
  const mayChangeFiles = may(role, 'upload-file');
  const decodes = await decodesOf(services, row.id);
  const latest = decodes.find((decode) => decode.state === 'done' && !decode.inputWithdrawn) ?? null;
  const result = latest ? await resultFor(services, latest.id) : null;
  return {
    ...heading(row),
    parties: await partiesOn(services, row.id),
    nextMove: await currentMove(services, row.id),
    hints: latest ? await hintsOf(services, { id: latest.id, result }, may(role, 'judge-hint')) : [],
    decodes, latestDecodeId: latest?.id ?? null,
    files: [...await filesOn(services, row.id, mayChangeFiles), ...await veiledOn(services, row.id)],
    retests: await retestsOf(services, row.id),
    waiver: await waiver(services, issue),
    waiting: await waitedByCause(services, row.id),
    ...await followingOf(services, row.id),
    moves: possibleMoves(issue, row, row.stage === 'under-retest' ? await freshOutcome(services, row.id) : null),
    actions: {
      edit: mayChange(issue, 'edit-issue'), changeSeverity: mayChange(issue, 'change-severity'), setNextMove: open && may(role, 'set-next-move'),
      addFiles: mayChangeFiles, decode: may(role, 'decode'), write: may(role, 'write-entry'),
      retest: row.stage === 'under-retest' && may(role, 'record-retest') && issue.standing.isLab, share: may(role, 'share-issue'),
    },
  };
}

function heading(row: IssueRow) {
  const raisedParty = row.raisedByPartyName ? { id: row.raisedByPartyId, name: row.raisedByPartyName, shortName: row.raisedByPartyShort ?? row.raisedByPartyName } : null;
  return {
    id: row.id, programme: { id: row.programmeId, code: row.programmeCode, name: row.programmeName }, number: row.number, version: row.version,
    title: row.title, description: row.description, severity: row.severity, stage: row.stage,
    raisedAt: row.raisedAt.toISOString(), raisedBy: { id: row.raisedById, name: row.raisedByName, party: raisedParty }, settledAt: row.settledAt?.toISOString() ?? null,
    link: { id: row.linkId, name: row.linkName, interface: row.interface, centreFrequencyHz: row.centreFrequencyHz },
    a: row.a, b: row.b, transmitter: row.transmitter,
    lastRung: { downlink: row.downlink, uplink: row.uplink }, signalPath: { ...NO_PATH, ...row.signalPath }, baseline: row.baseline,
  };
}

async function waiver(services: Services, issue: GrantedIssue): Promise<Issue['waiver']> {
  const row = await waiverOf(services, issue.issueId);
  if (!row) return null;
  const { returnedAt, ...rest } = row;
  const inForce = issue.stage === 'waived' && returnedAt === null;
  const signed = rest.signatures.some(({ party }) => party.id === issue.standing.partyId);
  const pending = returnedAt === null && !['settled', 'waived', 'withdrawn'].includes(issue.stage);
  return { ...rest, inForce, pending, actions: { sign: pending && !signed && isOnASide(issue) && may(issue.standing.role, 'move-issue') } };
}

/** The moves with what still blocks each, so that the page can say it before anyone tries. */
function possibleMoves(issue: GrantedIssue, row: IssueRow, outcome: 'clean' | 'failed' | null): PossibleMove[] {
  return movesFrom(row.stage, issue.standing.role, standingOnLink(issue)).map(({ to, label, requires }) => ({
    to, label, requires: [...requires], buildSides: requires.includes('build') ? offersBuildsOf(issue) : [],
    blockedBy: requires.includes('clean-retest') && outcome !== 'clean' ? 'needs a clean retest on named builds'
      : requires.includes('failed-retest') && outcome !== 'failed' ? 'needs a failed retest' : null,
  }));
}
