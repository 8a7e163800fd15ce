/**
 * The register's first page as one would write it by hand for a reader whose parties are known: $1 the
 * parties, $2 the person. Run as a role to which no policy applies, with the reach in the statement.
 */
export const PAGE_BY_HAND = `
  with page as materialized (
    select i.* from issues i where i.open and i.party_ids && $1::uuid[] order by i.move_due asc nulls last, i.id limit 51)
  select g.code as programme, i.number, i.title, i.severity, i.stage, l.id as "linkId", l.name as "linkName", l.interface,
    a.id as "aId", a.name as "aName", a.short_name as "aShort", b.id as "bId", b.name as "bName", b.short_name as "bShort",
    i.rung_downlink as downlink, i.rung_uplink as uplink, i.likely_code as code, i.likely_side as side, i.likely_confidence as confidence, i.decode_state as "decodeState",
    w.id as "moveId", w.name as "moveName", w.short_name as "moveShort", i.move_since as since, i.move_due as due,
    coalesce(i.open and i.move_due < current_date, false) as late, extract(epoch from now() - i.move_since)::float8 / 86400 as "waitingDays",
    i.raised_at as "raisedAt", i.updated_at as "updatedAt", i.updated_at > coalesce(k.at, '-infinity') as unseen
  from page i join programmes g on g.id = i.programme_id join links l on l.id = i.link_id
  join parties a on a.id = l.party_a_id join parties b on b.id = l.party_b_id left join parties w on w.id = i.move_party_id
  left join looks k on k.issue_id = i.id and k.person_id = $2
  order by i.move_due asc nulls last, i.id`;

/** How many match and how many there are, in one reading: $1 the parties. */
export const COUNTS_BY_HAND = `
  select count(*) filter (where open)::integer as matching, count(*)::integer as "all" from issues where party_ids && $1::uuid[]`;
