import type { Issue, NextMove } from '#shared/api/issues';
import type { PartyRef } from '#shared/api/common';
import type { Services } from '../http/services.js';

export interface IssueRow {
  id: string; number: string; version: number; title: string; description: string;
  severity: Issue['severity']; stage: Issue['stage']; raisedAt: Date; settledAt: Date | null;
  raisedById: string; raisedByName: string; raisedByPartyId: string; raisedByPartyName: string | null; raisedByPartyShort: string | null;
  programmeId: string; programmeCode: string; programmeName: string;
  linkId: string; linkName: string; interface: Issue['link']['interface']; centreFrequencyHz: number | null;
  transmitter: 'a' | 'b' | null; downlink: string | null; uplink: string | null; signalPath: Partial<Issue['signalPath']>; baseline: string;
  a: Issue['a']; b: Issue['b'];
}

const end = (side: 'a' | 'b') => `
  (select json_build_object(
    'unit', json_build_object('id', u.id, 'name', u.name, 'part', u.part),
    'party', json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name),
    'build', (select json_build_object('id', x.id, 'label', x.label, 'note', x.note, 'addedAt', to_char(x.added_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) from builds x where x.id = i.build_${side}_id))
    from units u join parties p on p.id = u.party_id where u.id = l.unit_${side}_id) as ${side}`;

export function issueRow(services: Services, issueId: string): Promise<IssueRow | null> {
  return services.database.row<IssueRow>(`
    select i.id, i.number, i.version, i.title, i.description, i.severity, i.stage, i.raised_at as "raisedAt", i.settled_at as "settledAt",
      i.raised_by as "raisedById", i.raised_by_name as "raisedByName", i.raised_by_party_id as "raisedByPartyId",
      r.name as "raisedByPartyName", r.short_name as "raisedByPartyShort",
      g.id as "programmeId", g.code as "programmeCode", g.name as "programmeName",
      l.id as "linkId", l.name as "linkName", l.interface, l.centre_frequency_hz as "centreFrequencyHz",
      i.transmitter, i.rung_downlink as downlink, i.rung_uplink as uplink, i.signal_path as "signalPath", i.baseline,
      ${end('a')}, ${end('b')}
    from issues i join programmes g on g.id = i.programme_id join links l on l.id = i.link_id
    left join parties r on r.id = i.raised_by_party_id
    where i.id = $1`, [issueId]);
}

export function partiesOn(services: Services, issueId: string): Promise<PartyRef[]> {
  return services.database.rows<PartyRef>(`
    select p.id, p.name, p.short_name as "shortName" from shares s join parties p on p.id = s.party_id where s.issue_id = $1 order by s.since, p.name`, [issueId]);
}

export async function currentMove(services: Services, issueId: string): Promise<NextMove | null> {
  const row = await services.database.row<{ id: string; name: string; shortName: string; ask: string; since: Date; due: string | null; late: boolean; cause: NextMove['cause'] }>(`
    select p.id, p.name, p.short_name as "shortName", n.ask, n.since, n.due, coalesce(n.due < current_date, false) as late, n.cause
    from next_moves n join parties p on p.id = n.party_id where n.issue_id = $1 and n.ended_at is null`, [issueId]);
  if (!row) return null;
  const { id, name, shortName, since, ...rest } = row;
  return { party: { id, name, shortName }, since: since.toISOString(), ...rest };
}

/** Days waited so far, by whose time ran. */
export function waitedByCause(services: Services, issueId: string): Promise<Issue['waiting']> {
  return services.database.rows<Issue['waiting'][number]>(`
    select cause, sum(extract(epoch from coalesce(ended_at, now()) - since))::float8 / 86400 as days
    from next_moves where issue_id = $1 group by cause order by days desc`, [issueId]);
}

export async function retestsOf(services: Services, issueId: string): Promise<Issue['retests']> {
  const rows = await services.database.rows<Omit<Issue['retests'][number], 'at' | 'lastRung'> & { at: Date; downlink: string | null; uplink: string | null }>(`
    select r.id, r.outcome, a.label as "buildA", b.label as "buildB", r.recorded_by_name as by, r.at, r.note, d.number as "decodeNumber",
      r.rung_downlink as downlink, r.rung_uplink as uplink
    from retests r join builds a on a.id = r.build_a_id join builds b on b.id = r.build_b_id left join decodes d on d.id = r.decode_id
    where r.issue_id = $1 order by r.at desc`, [issueId]);
  return rows.map(({ at, downlink, uplink, ...row }) => ({ ...row, at: at.toISOString(), lastRung: { downlink, uplink } }));
}

interface WaiverRow { id: string; reason: string; endsOn: string; returnedAt: Date | null; signatures: { party: PartyRef; by: string; at: string }[] }

/** The latest waiver asked for, with its signatures. */
export function waiverOf(services: Services, issueId: string): Promise<WaiverRow | null> {
  return services.database.row<WaiverRow>(`
    select w.id, w.reason, w.ends_on as "endsOn", w.returned_at as "returnedAt",
      coalesce((select json_agg(json_build_object('party', json_build_object('id', p.id, 'name', p.name, 'shortName', p.short_name), 'by', s.person_name,
        'at', to_char(s.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by s.at)
        from waiver_signatures s join parties p on p.id = s.party_id where s.waiver_id = w.id), '[]') as signatures
    from waivers w where w.issue_id = $1 order by w.at desc limit 1`, [issueId]);
}

export async function followingOf(services: Services, issueId: string): Promise<{ following: boolean; followers: number }> {
  const row = await services.database.row<{ following: boolean; followers: number }>(`
    select coalesce(bool_or(person_id = access.person()), false) as following, count(*)::integer as followers from followers where issue_id = $1`, [issueId]);
  return row ?? { following: false, followers: 0 };
}
