/** Programmes, parties, people, memberships, sessions, and the functions on which every policy rests. */
export const up = `
create schema if not exists access;
create schema if not exists auth;
revoke all on schema public from public;
grant usage on schema public, access to crosstie_app, crosstie_worker;
grant usage on schema auth to crosstie_app;

create table programmes (
  id uuid primary key default gen_random_uuid(),
  code text not null unique check (code ~ '^[A-Z]{2,5}$'),
  name text not null check (length(name) between 1 and 120),
  created_at timestamptz not null default now()
);
create table parties (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  name text not null check (length(name) between 1 and 80),
  short_name text not null check (length(short_name) between 1 and 24),
  parts text[] not null check (parts <@ array['radio unit', 'distributed unit', 'access point', 'terminal', 'test lab']),
  issuer text not null,
  created_at timestamptz not null default now(),
  unique (programme_id, id),
  unique (programme_id, name)
);
create table people (
  id uuid primary key default gen_random_uuid(),
  issuer text not null,
  subject text not null,
  name text not null,
  email text not null,
  time_zone text not null default 'UTC',
  notify_next_move boolean not null default true,
  notify_entries boolean not null default true,
  notify_stages boolean not null default true,
  day_sheet_looked_at timestamptz,
  created_at timestamptz not null default now(),
  unique (issuer, subject)
);
create table memberships (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  party_id uuid not null,
  person_id uuid not null references people,
  role text not null check (role in ('integration-engineer', 'vendor-engineer', 'programme-manager', 'programme-administrator', 'observer')),
  joined_at timestamptz not null default now(),
  left_at timestamptz,
  foreign key (programme_id, party_id) references parties (programme_id, id)
);
-- One standing a person in a programme: what one may see must not depend on which of two hats is worn.
create unique index memberships_current on memberships (person_id, programme_id) where left_at is null;
create index memberships_party on memberships (party_id) where left_at is null;

create table invitations (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  party_id uuid not null,
  email text not null,
  role text not null,
  token_hash bytea not null unique,
  invited_by text not null,
  created_at timestamptz not null default now(),
  expires_at timestamptz not null,
  used_at timestamptz,
  foreign key (programme_id, party_id) references parties (programme_id, id)
);
create index invitations_programme on invitations (programme_id, created_at);

create table sessions (
  token_hash bytea primary key,
  id uuid not null unique default gen_random_uuid(),
  person_id uuid not null references people,
  agent text not null default '',
  created_at timestamptz not null default now(),
  last_seen_at timestamptz not null default now(),
  idle interval not null,
  expires_at timestamptz not null,
  absolute_expires_at timestamptz not null
);
create index sessions_person on sessions (person_id);

-- Which parties a person may know of: those that once met on a link or an issue.
create table acquaintances (
  party_id uuid not null references parties,
  other_id uuid not null references parties,
  primary key (party_id, other_id)
);

create function access.person() returns uuid language sql stable
  as $$ select nullif(current_setting('crosstie.person', true), '')::uuid $$;

create function access.my_parties() returns uuid[] language sql stable security definer set search_path = public, pg_temp
  as $$ select coalesce(array_agg(party_id), '{}') from memberships where person_id = access.person() and left_at is null $$;
create function access.my_programmes() returns uuid[] language sql stable security definer set search_path = public, pg_temp
  as $$ select coalesce(array_agg(programme_id), '{}') from memberships where person_id = access.person() and left_at is null $$;
create function access.programmes_as(variadic roles text[]) returns uuid[] language sql stable security definer set search_path = public, pg_temp
  as $$ select coalesce(array_agg(programme_id), '{}') from memberships where person_id = access.person() and left_at is null and role = any(roles) $$;
-- Programmes in which my party is the test lab and I am more than an observer.
create function access.lab_programmes() returns uuid[] language sql stable security definer set search_path = public, pg_temp
  as $$ select coalesce(array_agg(m.programme_id), '{}') from memberships m join parties p on p.id = m.party_id
        where m.person_id = access.person() and m.left_at is null and m.role <> 'observer' and 'test lab' = any(p.parts) $$;
create function access.known_parties() returns uuid[] language sql stable security definer set search_path = public, pg_temp
  as $$ select access.my_parties() || coalesce(array_agg(other_id), '{}') from acquaintances where party_id = any(access.my_parties()) $$;
create function access.meet(parties uuid[]) returns void language sql security definer set search_path = public, pg_temp
  as $$ insert into acquaintances select a, b from unnest(parties) a, unnest(parties) b where a <> b on conflict do nothing $$;
revoke execute on function access.meet(uuid[]) from public;

alter table programmes enable row level security;
alter table parties enable row level security;
alter table people enable row level security;
alter table memberships enable row level security;
alter table invitations enable row level security;
alter table sessions enable row level security;
alter table acquaintances enable row level security;

create policy programmes_read on programmes for select to crosstie_app
  using (id = any((select access.my_programmes())::uuid[]));
create policy parties_read on parties for select to crosstie_app
  using (id = any((select access.known_parties())::uuid[])
      or programme_id = any((select access.programmes_as('programme-manager', 'programme-administrator'))::uuid[])
      or programme_id = any((select access.lab_programmes())::uuid[]));
create policy parties_add on parties for insert to crosstie_app
  with check (programme_id = any((select access.programmes_as('programme-administrator'))::uuid[]));
create policy people_self on people for select to crosstie_app using (id = access.person());
create policy people_change_self on people for update to crosstie_app using (id = access.person()) with check (id = access.person());
create policy people_met on people for select to crosstie_app
  using (exists (select 1 from memberships m where m.person_id = people.id));
create policy memberships_read on memberships for select to crosstie_app
  using (person_id = (select access.person())
      or party_id = any((select access.my_parties())::uuid[])
      or programme_id = any((select access.programmes_as('programme-manager', 'programme-administrator'))::uuid[]));
create policy memberships_change on memberships for update to crosstie_app
  using (programme_id = any((select access.programmes_as('programme-administrator'))::uuid[]) or person_id = (select access.person()))
  with check (programme_id = any((select access.programmes_as('programme-administrator'))::uuid[]) or (person_id = (select access.person()) and left_at is not null));
create policy invitations_all on invitations for all to crosstie_app
  using (programme_id = any((select access.programmes_as('programme-administrator'))::uuid[]))
  with check (programme_id = any((select access.programmes_as('programme-administrator'))::uuid[])
      and exists (select 1 from parties p where p.id = invitations.party_id));
create policy sessions_mine on sessions for select to crosstie_app using (person_id = access.person());
create policy sessions_end on sessions for delete to crosstie_app using (person_id = access.person());
create policy acquaintances_none on acquaintances for select to crosstie_app using (false);

grant select on programmes, memberships, people, parties to crosstie_app;
grant insert on parties to crosstie_app;
grant update (time_zone, notify_next_move, notify_entries, notify_stages, day_sheet_looked_at) on people to crosstie_app;
grant update (role, left_at) on memberships to crosstie_app;
grant select (id, programme_id, party_id, email, role, invited_by, created_at, expires_at, used_at) on invitations to crosstie_app;
grant insert, delete on invitations to crosstie_app;
grant select (id, token_hash, person_id, agent, created_at, last_seen_at, expires_at), delete on sessions to crosstie_app;

create policy people_worker on people for select to crosstie_worker using (true);
create policy parties_worker on parties for select to crosstie_worker using (true);
create policy programmes_worker on programmes for select to crosstie_worker using (true);
create policy memberships_worker on memberships for select to crosstie_worker using (true);
grant select on people, parties, programmes, memberships to crosstie_worker;
`;
