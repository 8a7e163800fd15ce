import type { Overview } from '#shared/api/overview';
import type { Services } from '../http/services.js';

/** Every figure counts what the reader may see: the policies narrow each query. */
export function bySeverityAndStage(services: Services, programmeId: string): Promise<Overview['bySeverityAndStage']> {
  return services.database.rows(`select severity, stage, count(*)::integer as count from issues where programme_id = $1 and open group by severity, stage`, [programmeId]);
}

const AGE_BANDS = [[0, 7], [7, 14], [14, 28], [28, 56], [56, null]] as const;

export async function ages(services: Services, programmeId: string): Promise<Overview['byAge']> {
  const rows = await services.database.rows<{ days: number; severity: 'critical' | 'major' | 'minor' }>(
    'select extract(epoch from now() - raised_at)::float8 / 86400 as days, severity from issues where programme_id = $1 and open', [programmeId]);
  return AGE_BANDS.map(([fromDays, toDays]) => {
    const band = rows.filter(({ days }) => days >= fromDays && (toDays === null || days < toDays));
    const count = (wanted: string) => band.filter(({ severity }) => severity === wanted).length;
    return { fromDays, toDays, critical: count('critical'), major: count('major'), minor: count('minor') };
  });
}

/** Counted first by who has the next move, so that each issue is read once. */
export function byPair(services: Services, programmeId: string): Promise<Overview['byPair']> {
  return services.database.rows(`
    with counted as (
      select l.party_a_id, l.party_b_id, i.move_party_id, count(*) as open, count(*) filter (where i.severity = 'critical') as critical, min(i.raised_at) as oldest
      from issues i join links l on l.id = i.link_id where i.programme_id = $1 and i.open group by 1, 2, 3)
    select json_build_object('id', a.id, 'name', a.name, 'shortName', a.short_name) as a, json_build_object('id', b.id, 'name', b.name, 'shortName', b.short_name) as b,
      sum(c.open)::integer as open, sum(c.critical)::integer as critical, extract(epoch from now() - min(c.oldest))::float8 / 86400 as "oldestDays",
      coalesce(json_agg(json_build_object('party', w.short_name, 'count', c.open) order by c.open desc) filter (where w.id is not null), '[]') as "nextMoves"
    from counted c join parties a on a.id = c.party_a_id join parties b on b.id = c.party_b_id left join parties w on w.id = c.move_party_id
    group by a.id, b.id order by critical desc, open desc, a.name, b.name`, [programmeId]);
}

export function waitingByParty(services: Services, programmeId: string): Promise<Overview['waitingByParty']> {
  return services.database.rows(`
    with mine as materialized (select id, number, title, open, move_party_id, move_since from issues where programme_id = $1),
    longest as (
      select distinct on (move_party_id) move_party_id, json_build_object('number', number, 'title', title, 'days', extract(epoch from now() - move_since)::float8 / 86400) as issue
      from mine where open and move_party_id is not null order by move_party_id, move_since, number)
    select json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name) as party,
      count(*) filter (where i.open and n.ended_at is null)::integer as holding,
      count(*) filter (where i.open and n.ended_at is null and n.due < current_date)::integer as late,
      coalesce(sum(extract(epoch from coalesce(n.ended_at, now()) - n.since)), 0)::float8 / 86400 as "waitedDays",
      (select issue from longest where move_party_id = p.id) as longest
    from next_moves n join mine i on i.id = n.issue_id join parties p on p.id = n.party_id
    where n.programme_id = $1 group by p.id order by holding desc, "waitedDays" desc`, [programmeId]);
}

export function waitingByCause(services: Services, programmeId: string): Promise<Overview['waitingByCause']> {
  return services.database.rows(`
    select cause, sum(extract(epoch from coalesce(ended_at, now()) - since))::float8 / 86400 as days from next_moves where programme_id = $1 group by cause order by days desc`, [programmeId]);
}

/** Filed and ended by week over the last twelve, and how many were open at each week's end: each issue is read once. */
export function flowByWeek(services: Services, programmeId: string): Promise<Overview['flow']> {
  return services.database.rows(`
    with shown as (select date_trunc('week', now()) - interval '11 weeks' as first),
    turns as (
      select raised_at as at, 1 as filed, 0 as ended from issues where programme_id = $1
      union all
      select since, 0, 1 from stage_intervals where programme_id = $1 and ended_at is null and stage in ('settled', 'waived', 'withdrawn')),
    -- What turned before the first week counts to the week before it.
    by_week as (
      select greatest(date_trunc('week', at), first - interval '1 week') as week, sum(filed) as filed, sum(ended) as ended from turns, shown group by 1),
    standing as (
      select week, coalesce(filed, 0) as filed, coalesce(ended, 0) as ended, sum(coalesce(filed, 0) - coalesce(ended, 0)) over (order by week) as open
      from by_week full join (select generate_series(first - interval '1 week', date_trunc('week', now()), interval '1 week') as week from shown) weeks using (week))
    select to_char(week, 'YYYY-MM-DD') as week, filed::integer, ended::integer, open::integer from standing, shown
    where week between first and date_trunc('week', now()) order by week`, [programmeId]);
}
