import type { Build, Link, LinkDetail, Unit } from '#shared/api/links';
import type { Services } from '../http/services.js';
import { ladderStanding } from './interworking.js';

interface LinkRow {
  id: string; programme: string; name: string; interface: Link['interface']; centreFrequencyHz: number | null;
  a: Omit<Link['a'], 'build'>; b: Omit<Link['b'], 'build'>; buildA: Build | null; buildB: Build | null;
  openIssues: number; criticalIssues: number; baseline: { buildA: string; buildB: string; at: string } | null;
}

const UTC = (column: string) => `to_char(${column} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;
const end = (side: 'a' | 'b') => `
  (select json_build_object('unit', json_build_object('id', u.id, 'name', u.name, 'part', u.part), 'party', json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name))
    from units u join parties p on p.id = u.party_id where u.id = l.unit_${side}_id) as ${side}`;
const newest = (side: 'a' | 'b') => `
  (select json_build_object('id', x.id, 'label', x.label, 'note', x.note, 'addedAt', ${UTC('x.added_at')}) from builds x where x.unit_id = l.unit_${side}_id order by x.added_at desc, x.id limit 1) as "build${side.toUpperCase()}"`;

/** Links with their ends, newest builds, open issues and baseline: the pair of builds of the last clean retest. */
export async function linkRows(services: Services, only: { programme?: string | undefined; linkId?: string }): Promise<Link[]> {
  const rows = await services.database.rows<LinkRow>(`
    select l.id, g.code as programme, l.name, l.interface, l.centre_frequency_hz as "centreFrequencyHz", ${end('a')}, ${end('b')}, ${newest('a')}, ${newest('b')},
      count(i.id) filter (where i.open)::integer as "openIssues", count(i.id) filter (where i.open and i.severity = 'critical')::integer as "criticalIssues",
      (select json_build_object('buildA', ba.label, 'buildB', bb.label, 'at', ${UTC('r.at')})
        from retests r join issues x on x.id = r.issue_id join builds ba on ba.id = r.build_a_id join builds bb on bb.id = r.build_b_id
        where x.link_id = l.id and r.outcome = 'clean' order by r.at desc limit 1) as baseline
    from links l join programmes g on g.id = l.programme_id left join issues i on i.link_id = l.id
    where ($1::text is null or g.code = $1) and ($2::uuid is null or l.id = $2)
    group by l.id, g.code order by l.name, l.id`, [only.programme ?? null, only.linkId ?? null]);
  return rows.map(({ buildA, buildB, a, b, ...row }) => ({ ...row, a: { ...a, build: buildA }, b: { ...b, build: buildB } }));
}

export async function buildsOf(services: Services, unitId: string): Promise<Build[]> {
  const rows = await services.database.rows<Omit<Build, 'addedAt'> & { addedAt: Date }>('select id, label, note, added_at as "addedAt" from builds where unit_id = $1 order by added_at desc, id', [unitId]);
  return rows.map(({ addedAt, ...row }) => ({ ...row, addedAt: addedAt.toISOString() }));
}

export function unitRows(services: Services, programme: string | undefined): Promise<Unit[]> {
  return services.database.rows<Unit>(`
    select u.id, u.name, u.part, json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name) as party,
      coalesce((select json_agg(json_build_object('id', b.id, 'label', b.label, 'note', b.note, 'addedAt', ${UTC('b.added_at')}) order by b.added_at desc, b.id) from builds b where b.unit_id = u.id), '[]') as builds
    from units u join parties p on p.id = u.party_id join programmes g on g.id = u.programme_id
    where ($1::text is null or g.code = $1) order by p.name, u.name`, [programme ?? null]);
}

export function issuesOnLink(services: Services, linkId: string): Promise<LinkDetail['issues']> {
  return services.database.rows<LinkDetail['issues'][number]>(`
    select g.code as programme, i.number, i.title, i.stage, i.severity from issues i join programmes g on g.id = i.programme_id
    where i.link_id = $1 order by i.open desc, i.raised_at desc limit 200`, [linkId]);
}

/** What the issues of a link say of each rung; the rule stands beside `ladderStanding`. */
export async function interworkingOf(services: Services, linkId: string): Promise<LinkDetail['interworking']> {
  const link = await services.database.row<{ interface: Link['interface'] }>('select interface from links where id = $1', [linkId]);
  const evidence = await services.database.rows<{ programme: string; number: string; title: string; stage: string; downlink: string | null; uplink: string | null; buildA: string | null; buildB: string | null; clean: boolean }>(`
    select g.code as programme, i.number, i.title, i.stage, i.rung_downlink as downlink, i.rung_uplink as uplink, a.label as "buildA", b.label as "buildB",
      exists (select 1 from retests r where r.issue_id = i.id and r.outcome = 'clean') as clean
    from issues i join programmes g on g.id = i.programme_id left join builds a on a.id = i.build_a_id left join builds b on b.id = i.build_b_id
    where i.link_id = $1 and i.stage <> 'withdrawn' order by i.raised_at desc`, [linkId]);
  return link ? ladderStanding(link.interface, evidence) : [];
}
