/**
 * Lists that stay quick with tens of thousands of issues: the functions on which every policy rests
 * keep their plans, and each order that the register offers has an index.
 */
export const up = `
-- In plpgsql a plan is kept for the connection; in SQL it is made anew by each query that asks.
create or replace function access.my_parties() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp
  as $$ begin return (select coalesce(array_agg(party_id), '{}') from memberships where person_id = access.person() and left_at is null); end $$;
create or replace function access.my_programmes() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp
  as $$ begin return (select coalesce(array_agg(programme_id), '{}') from memberships where person_id = access.person() and left_at is null); end $$;
create or replace function access.programmes_as(variadic roles text[]) returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp
  as $$ begin return (select coalesce(array_agg(programme_id), '{}') from memberships where person_id = access.person() and left_at is null and role = any(roles)); end $$;
create or replace function access.lab_programmes() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp
  as $$ begin return (select coalesce(array_agg(m.programme_id), '{}') from memberships m join parties p on p.id = m.party_id
        where m.person_id = access.person() and m.left_at is null and m.role <> 'observer' and 'test lab' = any(p.parts)); end $$;
create or replace function access.known_parties() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp
  as $$ declare mine constant uuid[] := access.my_parties();
        begin return (select mine || coalesce(array_agg(other_id), '{}') from acquaintances where party_id = any(mine)); end $$;

-- A count, and what asks for many rows whether their issue is seen, reads this index and not the issues.
create index issues_reach on issues (open, programme_id) include (party_ids, id);

-- One index an order, read from either end; what may be missing stands last either way and needs one a direction.
create index issues_due_any on issues (move_due, id);
create index issues_due_back on issues (move_due desc nulls last, id desc);
create index issues_since on issues (move_since, id);
create index issues_since_back on issues (move_since desc nulls last, id desc);
create index issues_severity on issues (array_position(array['critical', 'major', 'minor'], severity), id);
create index issues_stage on issues (array_position(array['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn'], stage), id);
create index issues_number on issues (number, id);
create index issues_recent on issues (open, updated_at);
create index events_recent on events (at desc, id);

-- What is found is looked up by word and then held against the acting person's reach, not the reach first.
create or replace function access.find_issues(p_text text) returns setof uuid language plpgsql stable security definer set search_path = public, pg_temp as $$
declare
  mine constant uuid[] := access.my_parties();
  managed constant uuid[] := access.programmes_as('programme-manager');
  asked constant tsquery := websearch_to_tsquery('simple', p_text);
  plain constant text := lower(trim(p_text));
begin
  return query
    select i.id from issues i
      where (i.words @@ asked or i.number = regexp_replace(plain, '^[a-z]+/', '')) and (i.party_ids && mine or i.programme_id = any(managed))
    union
    select i.id from entries e join issues i on i.id = e.issue_id
      where e.words @@ asked and e.withdrawn_at is null and (e.reach = 'everyone' or e.author_party_id = any(mine))
        and (i.party_ids && mine or i.programme_id = any(managed))
    union
    select i.id from snapshot_parameters s join files f on f.id = s.file_id join issues i on i.id = f.issue_id
      where lower(s.raw) = plain and f.withdrawn_at is null and (f.reach = 'everyone' or f.party_id = any(mine) or f.uploader_party_id = any(mine))
        and (i.party_ids && mine or i.programme_id = any(managed));
end $$;
`;
