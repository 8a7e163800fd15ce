import type { Me } from '#shared/api/people';
import { may } from '../access/policy.js';
import { idParam, signedIn, standings } from '../access/rules.js';
import { endpoint, type Mounted } from '../http/endpoint.js';
import { invalid, notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';

async function readMe(services: Services, caller: Caller): Promise<Me> {
  const person = await services.database.row<{ id: string; name: string; email: string; timeZone: string; nextMove: boolean; entries: boolean; stages: boolean }>(`
    select id, name, email, time_zone as "timeZone", notify_next_move as "nextMove", notify_entries as entries, notify_stages as stages from people where id = access.person()`);
  if (!person) throw notFound();
  const { nextMove, entries, stages, ...rest } = person;
  const mine = await standings(services);
  return {
    ...rest, name: caller.name, notify: { nextMove, entries, stages },
    memberships: mine.map((standing) => ({
      id: standing.membershipId, role: standing.role,
      programme: { id: standing.programmeId, code: standing.programmeCode, name: standing.programmeName },
      party: { id: standing.partyId, name: standing.partyName, shortName: standing.partyShortName },
      actions: { fileIssue: may(standing.role, 'file-issue') },
    })),
  };
}

function refuseUnknownZone(zone: string): void {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone }).format();
  } catch {
    throw invalid('timeZone', `"${zone}" is not a time zone; use a name such as Europe/Lisbon or UTC`);
  }
}

export const accountEndpoints: Mounted[] = [
  endpoint('readMe', signedIn, ({ services, caller }) => readMe(services, caller)),
  endpoint('changeMe', signedIn, async ({ services, caller, body }) => {
    if (body.timeZone !== undefined) refuseUnknownZone(body.timeZone);
    await services.database.change(`
      update people set time_zone = coalesce($1, time_zone), notify_next_move = coalesce($2, notify_next_move), notify_entries = coalesce($3, notify_entries), notify_stages = coalesce($4, notify_stages)
      where id = access.person()`, [body.timeZone ?? null, body.notify?.nextMove ?? null, body.notify?.entries ?? null, body.notify?.stages ?? null]);
    return readMe(services, caller);
  }),
  endpoint('listMySessions', signedIn, async ({ services, caller }) => {
    const rows = await services.database.rows<{ id: string; createdAt: Date; lastSeenAt: Date; agent: string }>('select id, created_at as "createdAt", last_seen_at as "lastSeenAt", agent from sessions where expires_at > now() order by last_seen_at desc');
    return { items: rows.map(({ id, createdAt, lastSeenAt, agent }) => ({ id, agent, createdAt: createdAt.toISOString(), lastSeenAt: lastSeenAt.toISOString(), current: id === caller.sessionId })) };
  }),
  endpoint('endMySession', signedIn, async ({ services, params }) => {
    const ended = await services.database.change('delete from sessions where id = $1', [idParam(params, 'sessionId')]);
    if (ended === 0) throw notFound();
  }),
  endpoint('listViews', signedIn, async ({ services }) => ({ items: await services.database.rows<{ id: string; name: string; query: string }>('select id, name, query from saved_views order by name, id') })),
  endpoint('keepView', signedIn, async ({ services, body }) => {
    const id = crypto.randomUUID();
    await services.database.change('insert into saved_views (id, person_id, name, query) values ($1, access.person(), $2, $3)', [id, body.name, body.query]);
    return { id, ...body };
  }),
  endpoint('dropView', signedIn, async ({ services, params }) => {
    if (await services.database.change('delete from saved_views where id = $1', [idParam(params, 'viewId')]) === 0) throw notFound();
  }),
];
