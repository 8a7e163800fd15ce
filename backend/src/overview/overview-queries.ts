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

export function byPair(services: Services, programmeId: string): Promise<Overview['byPair']> {
  return services.database.rows(`
    with open_issues as (
      select i.severity, i.raised_at, i.move_party_id, l.party_a_id, l.party_b_id from issues i join links l on l.id = i.link_id where i.programme_id = $1 and i.open)
    select json_build_object('id', a.id, 'name', a.name, 'shortName', a.short_name) as a, json_build_object('id', b.id, 'name', b.name, 'shortName', b.short_name) as b,
      count(*)::integer as open, count(*) filter (where o.severity = 'critical')::integer as critical,
      max(extract(epoch from now() - o.raised_at))::float8 / 86400 as "oldestDays",
      coalesce((select json_agg(json_build_object('party', w.short_name, 'count', w.n) order by w.n desc) from (
        select p.short_name, count(*)::integer as n from open_issues x join parties p on p.id = x.move_party_id
        where x.party_a_id = a.id and x.party_b_id = b.id group by p.short_name) w), '[]') as "nextMoves"
    from open_issues o join parties a on a.id = o.party_a_id join parties b on b.id = o.party_b_id
    group by a.id, b.id order by critical desc, open desc, a.name, b.name`, [programmeId]);
}

export function waitingByParty(services: Services, programmeId: string): Promise<Overview['waitingByParty']> {
  return services.database.rows(`
    select json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name) as party,
      count(*) filter (where i.open and n.ended_at is null)::integer as holding,
      count(*) filter (where i.open and n.ended_at is null and n.due < current_date)::integer as late,
      coalesce(sum(extract(epoch from coalesce(n.ended_at, now()) - n.since)), 0)::float8 / 86400 as "waitedDays",
      (select json_build_object('number', x.number, 'title', x.title, 'days', extract(epoch from now() - x.move_since)::float8 / 86400)
        from issues x where x.programme_id = $1 and x.open and x.move_party_id = p.id order by x.move_since limit 1) as longest
    from next_moves n join issues i on i.id = n.issue_id join parties p on p.id = n.party_id
    where n.programme_id = $1 group by p.id order by holding desc, "waitedDays" desc`, [programmeId]);
}

export function waitingByCause(services: Services, programmeId: string): Promise<Overview['waitingByCause']> {
  return services.database.rows(`
    select cause, sum(extract(epoch from coalesce(ended_at, now()) - since))::float8 / 86400 as days from next_moves where programme_id = $1 group by cause order by days desc`, [programmeId]);
}

/** Filed and ended by week over the last twelve, and how many were open at each week's end. */
export function flowByWeek(services: Services, programmeId: string): Promise<Overview['flow']> {
  return services.database.rows(`
    with weeks as (select generate_series(date_trunc('week', now()) - interval '11 weeks', date_trunc('week', now()), interval '1 week') as week),
    ended as (select issue_id, max(since) as at from stage_intervals where programme_id = $1 and ended_at is null and stage in ('settled', 'waived', 'withdrawn') group by issue_id)
    select to_char(w.week, 'YYYY-MM-DD') as week,
      (select count(*)::integer from issues i where i.programme_id = $1 and i.raised_at >= w.week and i.raised_at < w.week + interval '1 week') as filed,
      (select count(*)::integer from ended e where e.at >= w.week and e.at < w.week + interval '1 week') as ended,
      (select count(*)::integer from issues i left join ended e on e.issue_id = i.id where i.programme_id = $1 and i.raised_at < w.week + interval '1 week' and (e.at is null or e.at >= w.week + interval '1 week')) as open
    from weeks w order by w.week`, [programmeId]);
}
