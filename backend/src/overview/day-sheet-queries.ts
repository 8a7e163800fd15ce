import { registerQuery } from '#shared/api/issues';
import type { DaySheet, Found } from '#shared/api/overview';
import { IS_FOUND } from '../access/is-found.js';
import type { Services } from '../http/services.js';
import { registerRows } from '../issues/register-repository.js';

export async function lookedAt(services: Services): Promise<Date | null> {
  const row = await services.database.row<{ at: Date | null }>('select day_sheet_looked_at as at from people where id = access.person()');
  return row?.at ?? null;
}

/** The issues whose next move is my party's, the soonest due first, each with what is asked. */
export async function waitingForParty(services: Services): Promise<DaySheet['waitingForParty']> {
  const rows = await registerRows(services, registerQuery.parse({ move: 'mine', sort: 'due', size: 100 }));
  const asks = await services.database.rows<{ programme: string; number: string; ask: string }>(`
    select g.code as programme, i.number, n.ask
    from issues i join next_moves n on n.issue_id = i.id and n.ended_at is null join programmes g on g.id = i.programme_id
    where i.open and i.move_party_id = any((select access.my_parties())::uuid[])`);
  const askOf = new Map(asks.map(({ programme, number, ask }) => [`${programme}/${number}`, ask]));
  return rows.map((row) => ({ ...row, ask: askOf.get(`${row.programme}/${row.number}`) ?? null }));
}

/** What others did since I looked, newest first; without a look, the last week. */
export async function changedSince(services: Services, since: Date | null): Promise<DaySheet['changed']> {
  const rows = await services.database.rows<Omit<DaySheet['changed'][number], 'at'> & { at: Date }>(`
    select e.at, g.code as programme, i.number, i.title, e.text, e.person_name as person
    from events e join issues i on i.id = e.issue_id join programmes g on g.id = i.programme_id
    where e.at > coalesce($1::timestamptz, now() - interval '7 days') and e.person_id is distinct from access.person()
    order by e.at desc, e.id limit 50`, [since]);
  return rows.map(({ at, ...row }) => ({ ...row, at: at.toISOString() }));
}

export function runningDecodes(services: Services): Promise<DaySheet['running']> {
  return services.database.rows<DaySheet['running'][number]>(`
    select g.code as programme, i.number, i.title, d.id as "decodeId", d.number as "decodeNumber", d.step, d.progress
    from decodes d join issues i on i.id = d.issue_id join programmes g on g.id = i.programme_id
    where d.state in ('queued', 'running') order by d.queued_at limit 50`);
}

export async function countsFor(services: Services): Promise<DaySheet['counts']> {
  const row = await services.database.row<DaySheet['counts']>(`
    select count(*)::integer as open, count(*) filter (where severity = 'critical')::integer as critical,
      count(*) filter (where move_due < current_date)::integer as late, count(*) filter (where move_party_id = any((select access.my_parties())::uuid[]))::integer as mine
    from issues where open`);
  return row ?? { open: 0, critical: 0, late: 0, mine: 0 };
}

/** Search answers identifiers inside the scope; the rows are read under the policies, the latest first. */
export async function foundIssues({ database }: Services, personId: string, text: string): Promise<Found['items']> {
  return database.askAs(personId, `
    with found as materialized (
      select i.programme_id, i.number, i.title, i.stage, i.link_id, i.open, i.updated_at from issues i
      where ${IS_FOUND.replace('$?', '$1')} order by i.open desc, i.updated_at desc limit 20)
    select g.code as programme, i.number, i.title, i.stage, l.name as where
    from found i join programmes g on g.id = i.programme_id join links l on l.id = i.link_id order by i.open desc, i.updated_at desc`, [text]);
}
