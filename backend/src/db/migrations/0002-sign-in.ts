/** Session look-up and invitation binding: the only ways in which the application touches sessions and invitations of others. */
export const up = `
create function auth.begin_session(
  p_issuer text, p_subject text, p_email text, p_email_verified boolean, p_name text,
  p_token_hash bytea, p_invitation_hash bytea, p_idle interval, p_absolute interval, p_agent text default ''
) returns table (person_id uuid, outcome text)
language plpgsql security definer set search_path = public, pg_temp as $$
declare
  known people%rowtype;
  asked invitations%rowtype;
begin
  select * into known from people where issuer = p_issuer and subject = p_subject;
  if p_invitation_hash is not null then
    select i.* into asked from invitations i join parties p on p.id = i.party_id
      where i.token_hash = p_invitation_hash and i.used_at is null and i.expires_at > now()
        and p.issuer = p_issuer and p_email_verified and lower(i.email) = lower(p_email)
      for update of i;
    if asked.id is null or exists (
      select 1 from memberships m where m.person_id = known.id and m.programme_id = asked.programme_id and m.left_at is null
    ) then
      return query select null::uuid, 'refused'; return;
    end if;
    if known.id is null then
      insert into people (issuer, subject, name, email) values (p_issuer, p_subject, p_name, p_email) returning * into known;
    end if;
    insert into memberships (programme_id, party_id, person_id, role) values (asked.programme_id, asked.party_id, known.id, asked.role);
    update invitations set used_at = now() where id = asked.id;
  end if;
  -- The refusal is the same for a stranger and for a person who has left every programme.
  if known.id is null or not exists (select 1 from memberships m where m.person_id = known.id and m.left_at is null) then
    return query select null::uuid, 'refused'; return;
  end if;
  update people set name = p_name where id = known.id and name <> p_name;
  insert into sessions (token_hash, person_id, agent, idle, expires_at, absolute_expires_at)
    values (p_token_hash, known.id, left(p_agent, 200), p_idle, least(now() + p_idle, now() + p_absolute), now() + p_absolute);
  return query select known.id, 'ok';
end $$;

create function auth.session_person(p_token_hash bytea)
returns table (person_id uuid, display_name text, email text, expires_at timestamptz, session_id uuid)
language plpgsql security definer set search_path = public, pg_temp as $$
begin
  -- Written at most once a minute: a page that asks often must not write often.
  update sessions s set last_seen_at = now(), expires_at = least(now() + s.idle, s.absolute_expires_at)
    where s.token_hash = p_token_hash and s.expires_at > now() and s.last_seen_at < now() - interval '1 minute';
  return query select p.id, p.name, p.email, s.expires_at, s.id from sessions s join people p on p.id = s.person_id
    where s.token_hash = p_token_hash and s.expires_at > now()
      and exists (select 1 from memberships m where m.person_id = p.id and m.left_at is null);
end $$;

create function auth.end_session(p_token_hash bytea) returns void
language sql security definer set search_path = public, pg_temp
as $$ delete from sessions where token_hash = p_token_hash $$;

create function auth.sweep_sessions() returns void
language sql security definer set search_path = public, pg_temp
as $$ delete from sessions where expires_at < now() - interval '1 day' $$;

revoke execute on all functions in schema auth from public;
grant execute on all functions in schema auth to crosstie_app;
`;
