import { writeAudit } from '../access/audit.js';
import { may } from '../access/policy.js';
import { idParam, onIssue, standingIn, type Rule, type Standing } from '../access/rules.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { notFound } from '../http/problems.js';
import { recordEvent } from '../issues/record.js';
import { decodeById, hintsOf, resultFor } from './decode-queries.js';
import { enqueueDecode } from './request-decode.js';

/** A decode that exists for the caller. */
const onDecode: Rule<{ decodeId: string; standing: Standing }> = async ({ services, params }) => {
  const decodeId = idParam(params, 'decodeId');
  const row = await services.database.row<{ programmeId: string }>('select programme_id as "programmeId" from decodes where id = $1', [decodeId]);
  if (!row) throw notFound();
  return { decodeId, standing: await standingIn(services, row.programmeId, 'read') };
};

interface GrantedHint { hintId: string; issueId: string; code: string; onlyMine: boolean; standing: Standing }

const onHint: Rule<GrantedHint> = async ({ services, params }) => {
  const hintId = idParam(params, 'hintId');
  const row = await services.database.row<{ programmeId: string; issueId: string; code: string; reach: string }>(
    'select h.programme_id as "programmeId", h.issue_id as "issueId", h.code, d.reach from hints h join decodes d on d.id = h.decode_id where h.id = $1', [hintId]);
  if (!row) throw notFound();
  return { hintId, issueId: row.issueId, code: row.code, onlyMine: row.reach === 'my-party', standing: await standingIn(services, row.programmeId, 'judge-hint') };
};

export const decodeEndpoints: Mounted[] = [
  endpoint('requestDecode', onIssue('decode'), async ({ services, caller, body, granted }) => {
    const id = await enqueueDecode(services, { caller, standing: granted.standing }, { issueId: granted.issueId, programmeId: granted.standing.programmeId, inputs: body });
    const made = await decodeById(services, id);
    if (!made) throw notFound();
    return made;
  }),
  endpoint('readDecode', onDecode, async ({ services, granted }) => {
    const found = await decodeById(services, granted.decodeId);
    if (!found) throw notFound();
    const result = await resultFor(services, granted.decodeId);
    return { ...found, result, hints: await hintsOf(services, { id: granted.decodeId, result }, may(granted.standing.role, 'judge-hint')) };
  }),
  endpoint('judgeHint', onHint, async ({ services, caller, body, granted }) => {
    const { standing } = granted;
    await services.database.change(`
      insert into hint_verdicts (hint_id, programme_id, person_id, person_name, party_id, party_name, verdict, reason)
      values ($1, $2, access.person(), $3, $4, $5, $6, $7)`,
    [granted.hintId, standing.programmeId, caller.name, standing.partyId, standing.partyShortName, body.verdict, body.reason]);
    await recordEvent(services, { caller, standing }, {
      issueId: granted.issueId, programmeId: standing.programmeId, kind: 'verdict', onlyMyParty: granted.onlyMine,
      text: `${body.verdict} the hint "${granted.code}"${body.reason ? `: ${body.reason}` : ''}`,
    });
    await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: standing.partyId, action: 'judge-hint', object: granted.code, detail: body.verdict });
  }),
];
