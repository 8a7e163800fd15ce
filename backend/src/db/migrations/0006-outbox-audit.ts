/** Outbox, live events, audit record, search: what leaves the database, and the record of who did what. */
export const up = `
create table outbox (
  id uuid primary key default gen_random_uuid(),
  person_id uuid not null references people,
  programme_id uuid not null references programmes,
  issue_id uuid not null references issues,
  event_id uuid references events,
  entry_id uuid references entries,
  kind text not null check (kind in ('next-move', 'entry', 'stage', 'filed')),
  message_id text not null unique,
  created_at timestamptz not null default now(),
  attempts integer not null default 0,
  next_attempt_at timestamptz not null default now(),
  settled_at timestamptz,
  outcome text check (outcome in ('sent', 'beyond-reach', 'unwanted')),
  last_error text
);
create index outbox_due on outbox (next_attempt_at) where settled_at is null;
create index outbox_programme on outbox (programme_id) where settled_at is null;

create table live_events (
  id uuid primary key default gen_random_uuid(),
  place bigserial not null,
  programme_id uuid not null,
  issue_id uuid not null references issues,
  decode_id uuid,
  party_id uuid,
  topic text not null check (topic in ('issue', 'decode', 'register')),
  step text,
  progress double precision,
  at timestamptz not null default now()
);
create index live_events_place on live_events (place);
create index live_events_at on live_events (at);

create table audit (
  id uuid primary key default gen_random_uuid(),
  at timestamptz not null default now(),
  programme_id uuid references programmes,
  -- Whose record: null is the programme's own, read by its administrators.
  party_id uuid references parties,
  person_id uuid references people,
  person_name text,
  person_party text,
  action text not null check (length(action) <= 60),
  object text not null default '' check (length(object) <= 300),
  detail text not null default '' check (length(detail) <= 1000),
  outcome text not null default 'done' check (outcome in ('done', 'refused'))
);
create index audit_programme on audit (programme_id, at);
create index audit_party on audit (party_id, at);
create function access.audit_stays() returns trigger language plpgsql as $$
begin raise exception 'the audit record is append-only'; end $$;
create trigger audit_stays before update or delete on audit for each row execute function access.audit_stays();
create trigger audit_whole before truncate on audit for each statement execute function access.audit_stays();

alter table outbox enable row level security;
alter table live_events enable row level security;
alter table audit enable row level security;

-- The application writes mail only through the function below and reads none of it.
create policy outbox_none on outbox for select to crosstie_app using (false);
create policy live_events_read on live_events for select to crosstie_app using (
  exists (select 1 from issues i where i.id = live_events.issue_id)
  and (party_id is null or party_id = any((select access.my_parties())::uuid[])));
create policy live_events_add on live_events for insert to crosstie_app with check (exists (select 1 from issues i where i.id = live_events.issue_id));
create policy audit_read on audit for select to crosstie_app using (
  (party_id is null and programme_id = any((select access.programmes_as('programme-administrator'))::uuid[]))
  or (party_id = any((select access.my_parties())::uuid[])
    and programme_id = any((select access.programmes_as('programme-administrator', 'programme-manager', 'vendor-engineer', 'integration-engineer'))::uuid[])));
create policy audit_add on audit for insert to crosstie_app with check (person_id is not distinct from (select access.person()));
grant select, insert on live_events, audit to crosstie_app;
grant usage on sequence live_events_place_seq to crosstie_app, crosstie_worker;

create policy outbox_worker on outbox for all to crosstie_worker using (true) with check (true);
create policy live_events_worker on live_events for all to crosstie_worker using (true) with check (true);
create policy audit_worker on audit for insert to crosstie_worker with check (person_id is null);
grant select, update, delete on outbox to crosstie_worker;
grant select, insert, delete on live_events to crosstie_worker;
grant insert on audit to crosstie_worker;

create function access.announce() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin perform pg_notify('crosstie_live', new.id::text); return new; end $$;
create trigger live_events_announce after insert on live_events for each row execute function access.announce();
-- What a reader missed after a given event, at most 200; null after when the event is gone.
create function access.missed_events(p_after uuid) returns setof uuid language sql stable security definer set search_path = public, pg_temp as $$
  select e.id from live_events e where e.place > (select place from live_events where id = p_after) order by e.place limit 200
$$;

-- Mail for the issue's followers and, for a next move, the people of the party asked. The reader's
-- reach is applied again when the message is written, under that reader.
create function access.queue_mail(p_issue uuid, p_kind text, p_event uuid, p_entry uuid) returns integer
language plpgsql security definer set search_path = public, pg_temp as $$
declare done integer;
begin
  insert into outbox (person_id, programme_id, issue_id, event_id, entry_id, kind, message_id)
    select p.id, i.programme_id, i.id, p_event, p_entry, p_kind, gen_random_uuid()::text
    from issues i
    join memberships m on m.programme_id = i.programme_id and m.left_at is null and m.party_id = any(i.party_ids)
    join people p on p.id = m.person_id
    where i.id = p_issue and (i.party_ids && access.my_parties() or i.programme_id = any(access.programmes_as('programme-manager')))
      and p.id <> access.person()
      and case p_kind when 'next-move' then p.notify_next_move when 'entry' then p.notify_entries else p.notify_stages end
      and (exists (select 1 from followers f where f.issue_id = i.id and f.person_id = p.id)
        or (p_kind in ('next-move', 'filed') and m.party_id = i.move_party_id and m.role in ('integration-engineer', 'vendor-engineer', 'programme-manager'))
        or (p_kind = 'filed' and m.role in ('integration-engineer', 'vendor-engineer')));
  get diagnostics done = row_count;
  return done;
end $$;
create function access.stuck_mail(p_programme uuid) returns integer language sql stable security definer set search_path = public, pg_temp as $$
  select case when p_programme = any(access.programmes_as('programme-administrator'))
    then (select count(*)::integer from outbox where programme_id = p_programme and settled_at is null and attempts >= 3) end
$$;

-- Search applies the acting person's scope itself, since text operators use no index under a policy; identifiers only.
create function access.find_issues(p_text text) returns setof uuid language sql stable security definer set search_path = public, pg_temp as $$
  with mine as (select access.my_parties() as parties, access.programmes_as('programme-manager') as managed),
  asked as (select websearch_to_tsquery('simple', p_text) as query, lower(trim(p_text)) as plain),
  scope as (select i.id from issues i, mine where i.party_ids && mine.parties or i.programme_id = any(mine.managed))
  select i.id from issues i, asked where i.id in (select id from scope)
      and (i.words @@ asked.query or i.number = regexp_replace(asked.plain, '^[a-z]+/', ''))
  union
  select e.issue_id from entries e, asked, mine where e.issue_id in (select id from scope) and e.withdrawn_at is null
      and e.words @@ asked.query and (e.reach = 'everyone' or e.author_party_id = any(mine.parties))
  union
  select f.issue_id from snapshot_parameters s join files f on f.id = s.file_id, asked, mine
    where f.issue_id in (select id from scope) and f.withdrawn_at is null and lower(s.raw) = asked.plain
      and (f.reach = 'everyone' or f.party_id = any(mine.parties) or f.uploader_party_id = any(mine.parties))
$$;
-- A free issue number at random: it answers one number and tells nothing of the others.
create function access.free_number(p_programme uuid) returns text language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if not p_programme = any(access.my_programmes()) then return null; end if;
  perform pg_advisory_xact_lock(hashtext('crosstie.number'), hashtext(p_programme::text));
  return (select lpad(n::text, 4, '0') from generate_series(0, 9999) n
    where not exists (select 1 from issues i where i.programme_id = p_programme and i.number = lpad(n::text, 4, '0'))
    order by random() limit 1);
end $$;
revoke execute on all functions in schema access from public;
grant execute on all functions in schema access to crosstie_app, crosstie_worker;
revoke execute on function access.meet(uuid[]), access.forget_derived(uuid) from crosstie_app, crosstie_worker;
`;
