/** Who is written to, in one place: the queue of a request and the worker ask the same function. */
export const up = `
-- Followers; of a next move and a new issue also the people of the party asked; of a new issue every engineer on it.
-- Whoever reads every issue may follow one that the own party is not on. What a letter says is decided when it is
-- written, under its reader; a private entry is not even queued for others.
create function access.mail_readers(p_issue uuid, p_kind text, p_entry uuid) returns setof uuid
language sql stable security definer set search_path = public, pg_temp as $$
  select p.id
    from issues i
    join memberships m on m.programme_id = i.programme_id and m.left_at is null and (m.party_id = any(i.party_ids) or m.role = 'programme-manager')
    join people p on p.id = m.person_id
    where i.id = p_issue and p.id is distinct from access.person()
      and case p_kind when 'next-move' then p.notify_next_move when 'entry' then p.notify_entries
        when 'filed' then p.notify_stages or (p.notify_next_move and m.party_id = i.move_party_id) else p.notify_stages end
      and (p_entry is null or exists (select 1 from entries e where e.id = p_entry and (e.reach = 'everyone' or e.author_party_id = m.party_id)))
      and (exists (select 1 from followers f where f.issue_id = i.id and f.person_id = p.id)
        or (p_kind in ('next-move', 'filed') and m.party_id = i.move_party_id and m.role in ('integration-engineer', 'vendor-engineer', 'programme-manager'))
        or (p_kind = 'filed' and m.party_id = any(i.party_ids) and m.role in ('integration-engineer', 'vendor-engineer')))
$$;
create or replace function access.queue_mail(p_issue uuid, p_kind text, p_event uuid, p_entry uuid) returns integer
language plpgsql security definer set search_path = public, pg_temp as $$
declare done integer;
begin
  insert into outbox (person_id, programme_id, issue_id, event_id, entry_id, kind, message_id)
    select reader, i.programme_id, i.id, p_event, p_entry, p_kind, gen_random_uuid()::text
    from issues i, access.mail_readers(p_issue, p_kind, p_entry) reader
    where i.id = p_issue and (i.party_ids && access.my_parties() or i.programme_id = any(access.programmes_as('programme-manager')));
  get diagnostics done = row_count;
  return done;
end $$;
revoke execute on function access.mail_readers(uuid, text, uuid) from public;
grant execute on function access.mail_readers(uuid, text, uuid) to crosstie_worker;
`;
