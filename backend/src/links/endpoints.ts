import { writeAudit } from '../access/audit.js';
import { may } from '../access/policy.js';
import { idParam, refuseUnless, signedIn, standingIn, standings, type Rule, type Standing } from '../access/rules.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { invalid, notFound, Refusal } from '../http/problems.js';
import { buildsOf, interworkingOf, issuesOnLink, linkRows, unitRows } from './link-queries.js';

const onLink: Rule<{ linkId: string; standing: Standing }> = async ({ services, params }) => {
  const linkId = idParam(params, 'linkId');
  const row = await services.database.row<{ programmeId: string }>('select programme_id as "programmeId" from links where id = $1', [linkId]);
  if (!row) throw notFound();
  return { linkId, standing: await standingIn(services, row.programmeId, 'read') };
};

export const linkEndpoints: Mounted[] = [
  endpoint('listLinks', signedIn, async ({ services, query }) => {
    const mine = await standings(services);
    return { items: await linkRows(services, { programme: query.programme }), actions: { add: mine.some(({ role, isLab }) => isLab && may(role, 'add-link')), addUnit: mine.some(({ role }) => may(role, 'add-unit')) } };
  }),
  endpoint('readLink', onLink, async ({ services, granted }) => {
    const [link] = await linkRows(services, { linkId: granted.linkId });
    if (!link) throw notFound();
    const { standing } = granted;
    const mayAdd = (partyId: string) => may(standing.role, 'add-build') && (standing.isLab || standing.partyId === partyId);
    return {
      ...link,
      unitBuilds: { a: await buildsOf(services, link.a.unit.id), b: await buildsOf(services, link.b.unit.id) },
      interworking: await interworkingOf(services, link.id),
      issues: await issuesOnLink(services, link.id),
      actions: { addBuildA: mayAdd(link.a.party.id), addBuildB: mayAdd(link.b.party.id) },
    };
  }),
  endpoint('listUnits', signedIn, async ({ services, query }) => ({ items: await unitRows(services, query.programme) })),

  endpoint('addLink', signedIn, async ({ services, caller, body }) => {
    const programme = await services.database.row<{ id: string }>('select id from programmes where code = $1', [body.programme]);
    if (!programme) throw notFound();
    const standing = await standingIn(services, programme.id, 'add-link');
    const sides = await services.database.rows<{ id: string; partyId: string }>('select id, party_id as "partyId" from units where id in ($1, $2) and programme_id = $3', [body.unitAId, body.unitBId, programme.id]);
    const partyOf = (unitId: string) => sides.find(({ id }) => id === unitId)?.partyId;
    const [partyA, partyB] = [partyOf(body.unitAId), partyOf(body.unitBId)];
    if (!partyA || !partyB) throw notFound();
    if (body.unitAId === body.unitBId) throw invalid('unitBId', 'a link needs two units');
    const id = crypto.randomUUID();
    await services.database.change(`
      insert into links (id, programme_id, name, interface, centre_frequency_hz, unit_a_id, unit_b_id, party_a_id, party_b_id, party_ids)
      values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10)`,
    [id, programme.id, body.name, body.interface, body.centreFrequencyHz, body.unitAId, body.unitBId, partyA, partyB, [...new Set([partyA, partyB, standing.partyId])]]);
    await writeAudit(services, caller, { programmeId: programme.id, partyId: null, action: 'add-link', object: body.name });
    return { id };
  }),
  endpoint('addUnit', signedIn, async ({ services, caller, body }) => {
    const programme = await services.database.row<{ id: string }>('select id from programmes where code = $1', [body.programme]);
    if (!programme) throw notFound();
    const standing = await standingIn(services, programme.id, 'add-unit');
    if (!standing.isLab && body.partyId !== standing.partyId) throw notFound();
    const id = crypto.randomUUID();
    await services.database.change('insert into units (id, programme_id, party_id, name, part) values ($1, $2, $3, $4, $5)', [id, programme.id, body.partyId, body.name, body.part]);
    await writeAudit(services, caller, { programmeId: programme.id, partyId: body.partyId, action: 'add-unit', object: body.name });
    return { id };
  }),
  endpoint('addBuild', signedIn, async ({ services, caller, body }) => {
    const unit = await services.database.row<{ programmeId: string; partyId: string }>('select programme_id as "programmeId", party_id as "partyId" from units where id = $1', [body.unitId]);
    if (!unit) throw notFound();
    const standing = await standingIn(services, unit.programmeId, 'add-build');
    refuseUnless(standing, 'add-build');
    if (!standing.isLab && unit.partyId !== standing.partyId) throw new Refusal(403, 'forbidden', 'Not yours to do', 'A build is added by the unit\'s own party or by the lab.');
    const twice = await services.database.row('select 1 as found from builds where unit_id = $1 and label = $2', [body.unitId, body.label]);
    if (twice) throw invalid('label', 'this unit has a build of that label already');
    const id = crypto.randomUUID();
    await services.database.change('insert into builds (id, programme_id, unit_id, label, note) values ($1, $2, $3, $4, $5)', [id, unit.programmeId, body.unitId, body.label, body.note]);
    await writeAudit(services, caller, { programmeId: unit.programmeId, partyId: unit.partyId, action: 'add-build', object: body.label });
    return { id, label: body.label, note: body.note, addedAt: services.now().toISOString() };
  }),
];
