import { createHash, randomBytes } from 'node:crypto';
import type { Programme } from '#shared/api/people';
import type { Role } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import { may } from '../access/policy.js';
import { idParam, inProgramme, type Standing } from '../access/rules.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { conflict, invalid, notFound, Refusal } from '../http/problems.js';
import type { Services } from '../http/services.js';
import { auditPage } from './audit-page.js';

async function readProgramme(services: Services, standing: Standing): Promise<Programme> {
  const { database } = services;
  const { programmeId } = standing;
  const parties = await database.rows<Programme['parties'][number]>(`
    select p.id, p.name, p.short_name as "shortName", p.parts, (select count(*)::integer from memberships m where m.party_id = p.id and m.left_at is null) as people
    from parties p where p.programme_id = $1 order by p.name`, [programmeId]);
  const people = await database.rows<{ membershipId: string; personId: string; name: string; email: string; role: Role; joinedAt: Date; partyId: string; partyName: string; partyShort: string }>(`
    select m.id as "membershipId", q.id as "personId", q.name, q.email, m.role, m.joined_at as "joinedAt", p.id as "partyId", p.name as "partyName", p.short_name as "partyShort"
    from memberships m join people q on q.id = m.person_id join parties p on p.id = m.party_id
    where m.programme_id = $1 and m.left_at is null order by p.name, q.name`, [programmeId]);
  const invitations = await database.rows<{ id: string; email: string; role: Role; expiresAt: Date; invitedBy: string; partyId: string; partyName: string; partyShort: string }>(`
    select i.id, i.email, i.role, i.expires_at as "expiresAt", i.invited_by as "invitedBy", p.id as "partyId", p.name as "partyName", p.short_name as "partyShort"
    from invitations i join parties p on p.id = i.party_id where i.programme_id = $1 and i.used_at is null and i.expires_at > now() order by i.created_at`, [programmeId]);
  const stuck = await database.row<{ stuck: number | null }>('select access.stuck_mail($1) as stuck', [programmeId]);
  return {
    id: programmeId, code: standing.programmeCode, name: standing.programmeName, parties,
    people: people.map((row) => ({ membershipId: row.membershipId, person: { id: row.personId, name: row.name, party: party(row) }, email: row.email, role: row.role, joinedAt: row.joinedAt.toISOString() })),
    invitations: invitations.map((row) => ({ id: row.id, email: row.email, party: party(row), role: row.role, expiresAt: row.expiresAt.toISOString(), invitedBy: row.invitedBy })),
    stuckMail: stuck?.stuck ?? null,
    actions: { invite: may(standing.role, 'invite'), changeRoles: may(standing.role, 'change-roles'), readAudit: may(standing.role, 'read-audit'), addParty: may(standing.role, 'add-party') },
  };
}

/** Two administrators that remove each other at the same moment must not both succeed. */
async function refuseWithoutAdministrator(services: Services, programmeId: string): Promise<void> {
  const left = await services.database.row(`select 1 as found from memberships where programme_id = $1 and left_at is null and role = 'programme-administrator'`, [programmeId]);
  if (!left) throw new Refusal(409, 'last-administrator', 'The last administrator', 'A programme keeps at least one administrator. Make somebody else one first.');
}

const party = (row: { partyId: string; partyName: string; partyShort: string }) => ({ id: row.partyId, name: row.partyName, shortName: row.partyShort });

export const programmeEndpoints: Mounted[] = [
  endpoint('readProgramme', inProgramme('read'), ({ services, granted }) => readProgramme(services, granted)),
  endpoint('addParty', inProgramme('add-party'), async ({ services, caller, body, granted }) => {
    const twice = await services.database.row('select 1 as found from parties where programme_id = $1 and name = $2', [granted.programmeId, body.name]);
    if (twice) throw invalid('name', 'a party of that name is in the programme already');
    const id = crypto.randomUUID();
    await services.database.change('insert into parties (id, programme_id, name, short_name, parts, issuer) values ($1, $2, $3, $4, $5, $6)', [id, granted.programmeId, body.name, body.shortName, body.parts, services.config.oidc.issuer]);
    await writeAudit(services, caller, { programmeId: granted.programmeId, partyId: null, action: 'add-party', object: body.name });
    return { id };
  }),
  endpoint('invite', inProgramme('invite'), async ({ services, caller, body, granted }) => {
    const found = await services.database.row<{ name: string }>('select name from parties where id = $1 and programme_id = $2', [body.partyId, granted.programmeId]);
    if (!found) throw notFound();
    const id = crypto.randomUUID();
    const token = randomBytes(32).toString('base64url');
    const expiresAt = new Date(services.now().getTime() + services.config.invitationDays * 86_400_000);
    await services.database.change(`
      insert into invitations (id, programme_id, party_id, email, role, token_hash, invited_by, expires_at) values ($1, $2, $3, $4, $5, $6, $7, $8)`,
    [id, granted.programmeId, body.partyId, body.email, body.role, createHash('sha256').update(token).digest(), caller.name, expiresAt]);
    await services.database.change(`
      insert into invitation_letters (invitation_id, programme_id, token, email, programme, party, invited_by, expires_at) values ($1, $2, $3, $4, $5, $6, $7, $8)`,
    [id, granted.programmeId, token, body.email, granted.programmeName, found.name, caller.name, expiresAt]);
    await writeAudit(services, caller, { programmeId: granted.programmeId, partyId: null, action: 'invite', object: body.email, detail: `as ${body.role} for ${found.name}` });
    return { id, link: `${services.config.publicUrl}/invitations/${token}`, expiresAt: expiresAt.toISOString() };
  }),
  endpoint('revokeInvitation', inProgramme('invite'), async ({ services, caller, granted, params }) => {
    const gone = await services.database.change('delete from invitations where id = $1 and programme_id = $2 and used_at is null', [idParam(params, 'invitationId'), granted.programmeId]);
    if (gone === 0) throw notFound();
    await writeAudit(services, caller, { programmeId: granted.programmeId, partyId: null, action: 'revoke-invitation', object: params.invitationId ?? '' });
  }),
  endpoint('changeMembership', inProgramme('change-roles'), async ({ services, caller, body, granted, params }) => {
    const id = idParam(params, 'membershipId');
    const before = await services.database.row<{ role: string; name: string; self: boolean }>(`
      select m.role, q.name, m.person_id = access.person() as self from memberships m join people q on q.id = m.person_id where m.id = $1 and m.programme_id = $2 and m.left_at is null`, [id, granted.programmeId]);
    if (!before) throw notFound();
    if (before.self) throw new Refusal(409, 'own-membership', 'Not your own', 'Ask another administrator to change your own membership, so that the programme is never left without one.');
    await services.database.rows("select pg_advisory_xact_lock(hashtextextended('crosstie.members.' || $1, 0))", [granted.programmeId]);
    const done = await services.database.change('update memberships set role = coalesce($2, role), left_at = case when $3 then now() end where id = $1 and left_at is null', [id, body.role ?? null, body.leave ?? false]);
    if (done === 0) throw conflict('Somebody changed this membership, or yours, meanwhile. Read the programme again.');
    await refuseWithoutAdministrator(services, granted.programmeId);
    await writeAudit(services, caller, { programmeId: granted.programmeId, partyId: null, action: 'change-membership', object: before.name, detail: body.leave ? 'left the programme' : `${before.role} to ${body.role ?? before.role}` });
  }),
  endpoint('readAudit', inProgramme('read-audit'), ({ services, query, granted }) => auditPage(services, granted.programmeId, query)),
];
