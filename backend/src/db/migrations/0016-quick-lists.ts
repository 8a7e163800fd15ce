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

-- A count reads this index and not the issues: it holds what the policy asks for.
create index issues_reach on issues (open, programme_id) include (party_ids);

-- One index an order, read from either end; what may be missing stands last either way and needs one a direction.
create index issues_due_any on issues (move_due, id);
create index issues_due_back on issues (move_due desc nulls last, id desc);
create index issues_since on issues (move_since, id);
create index issues_since_back on issues (move_since desc nulls last, id desc);
create index issues_severity on issues (array_position(array['critical', 'major', 'minor'], severity), id);
create index issues_stage on issues (array_position(array['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn'], stage), id);
create index issues_number on issues (number, id);
`;
