/** Units, builds, links, issues, shares: who stands on what decides what exists for whom. */
export const up = `
create table units (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  party_id uuid not null,
  name text not null check (length(name) between 1 and 80),
  part text not null check (part in ('radio unit', 'distributed unit', 'access point', 'terminal', 'test lab')),
  created_at timestamptz not null default now(),
  unique (programme_id, id),
  unique (party_id, name),
  foreign key (programme_id, party_id) references parties (programme_id, id)
);
create table builds (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  unit_id uuid not null,
  label text not null check (length(label) between 1 and 60),
  note text not null default '',
  added_at timestamptz not null default now(),
  unique (programme_id, id),
  unique (unit_id, label),
  foreign key (programme_id, unit_id) references units (programme_id, id)
);
create table links (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  name text not null check (length(name) between 1 and 120),
  interface text not null check (interface in ('air', 'fronthaul', 'wifi')),
  centre_frequency_hz double precision check (centre_frequency_hz > 0),
  unit_a_id uuid not null,
  unit_b_id uuid not null,
  party_a_id uuid not null references parties,
  party_b_id uuid not null references parties,
  party_ids uuid[] not null,
  created_at timestamptz not null default now(),
  unique (programme_id, id),
  check (unit_a_id <> unit_b_id),
  foreign key (programme_id, unit_a_id) references units (programme_id, id),
  foreign key (programme_id, unit_b_id) references units (programme_id, id)
);
create index links_parties on links using gin (party_ids);
create index links_programme on links (programme_id, name);

create table issues (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  number text not null check (number ~ '^[0-9]{4}$'),
  link_id uuid not null,
  party_ids uuid[] not null,
  title text not null check (length(title) between 4 and 200),
  description text not null default '',
  severity text not null check (severity in ('critical', 'major', 'minor')),
  stage text not null default 'raised' check (stage in ('raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn')),
  open boolean generated always as (stage not in ('settled', 'waived', 'withdrawn')) stored,
  version integer not null default 1,
  build_a_id uuid,
  build_b_id uuid,
  transmitter text check (transmitter in ('a', 'b')),
  rung_downlink text,
  rung_uplink text,
  signal_path jsonb not null default '{}',
  baseline text not null default '',
  raised_by uuid not null references people,
  raised_by_name text not null,
  raised_by_party_id uuid not null,
  raised_at timestamptz not null default now(),
  updated_at timestamptz not null default now(),
  settled_at timestamptz,
  file_key uuid,
  -- Copies kept by triggers and the worker, so that the register sorts and filters on an index.
  move_party_id uuid,
  move_since timestamptz,
  move_due date,
  likely_code text,
  likely_side text,
  likely_confidence double precision,
  decode_state text not null default 'none' check (decode_state in ('none', 'running', 'clean', 'hint', 'failed')),
  words tsvector generated always as (to_tsvector('simple', title || ' ' || description)) stored,
  unique (programme_id, id),
  unique (programme_id, number),
  unique (raised_by, file_key),
  foreign key (programme_id, link_id) references links (programme_id, id),
  foreign key (programme_id, build_a_id) references builds (programme_id, id),
  foreign key (programme_id, build_b_id) references builds (programme_id, id),
  foreign key (programme_id, raised_by_party_id) references parties (programme_id, id)
);
create index issues_parties on issues using gin (party_ids);
create index issues_due on issues (open, move_due, id);
create index issues_programme_due on issues (programme_id, open, move_due, id);
create index issues_raised on issues (raised_at, id);
create index issues_updated on issues (updated_at, id);
create index issues_link on issues (link_id, open);
create index issues_move on issues (move_party_id, open);
create index issues_words on issues using gin (words);

create table shares (
  programme_id uuid not null,
  issue_id uuid not null,
  party_id uuid not null,
  shared_by uuid references people,
  since timestamptz not null default now(),
  primary key (issue_id, party_id),
  foreign key (programme_id, issue_id) references issues (programme_id, id) on delete cascade,
  foreign key (programme_id, party_id) references parties (programme_id, id)
);
create index shares_party on shares (party_id);

create function access.check_parties() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if exists (select 1 from unnest(new.party_ids) p where not exists (select 1 from parties where id = p and programme_id = new.programme_id)) then
    raise exception 'a party of another programme' using errcode = 'foreign_key_violation';
  end if;
  return new;
end $$;
create trigger links_check before insert or update of party_ids on links for each row execute function access.check_parties();
create trigger issues_check before insert or update of party_ids on issues for each row execute function access.check_parties();

create function access.links_meet() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin perform access.meet(new.party_ids); return new; end $$;
create trigger links_meet after insert or update of party_ids on links for each row execute function access.links_meet();

create function access.issues_share() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  insert into shares (programme_id, issue_id, party_id, shared_by)
    select new.programme_id, new.id, p, access.person() from unnest(new.party_ids) p on conflict do nothing;
  perform access.meet(new.party_ids);
  return new;
end $$;
create trigger issues_share after insert on issues for each row execute function access.issues_share();
create function access.shares_follow() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update issues set party_ids = array(select party_id from shares where issue_id = new.issue_id order by since, party_id)
    where id = new.issue_id and not party_ids @> array[new.party_id];
  perform access.meet(array(select party_id from shares where issue_id = new.issue_id));
  return new;
end $$;
create trigger shares_follow after insert on shares for each row execute function access.shares_follow();

alter table units enable row level security;
alter table builds enable row level security;
alter table links enable row level security;
alter table issues enable row level security;
alter table shares enable row level security;

-- A party that shares an issue sees the link on which it stands.
create policy links_read on links for select to crosstie_app
  using (party_ids && (select access.my_parties())::uuid[]
      or programme_id = any((select access.programmes_as('programme-manager'))::uuid[])
      or exists (select 1 from issues i where i.link_id = links.id));
create policy links_add on links for insert to crosstie_app
  with check (programme_id = any((select access.lab_programmes())::uuid[]) and party_ids && (select access.my_parties())::uuid[]
      and exists (select 1 from units u where u.id = links.unit_a_id and u.party_id = links.party_a_id)
      and exists (select 1 from units u where u.id = links.unit_b_id and u.party_id = links.party_b_id));
create policy units_read on units for select to crosstie_app
  using (party_id = any((select access.my_parties())::uuid[])
      or programme_id = any((select access.lab_programmes())::uuid[])
      or programme_id = any((select access.programmes_as('programme-manager'))::uuid[])
      or exists (select 1 from links l where units.id in (l.unit_a_id, l.unit_b_id)));
create policy units_add on units for insert to crosstie_app
  with check (programme_id = any((select access.lab_programmes())::uuid[])
      or (party_id = any((select access.my_parties())::uuid[]) and programme_id = any((select access.programmes_as('vendor-engineer'))::uuid[])));
create policy builds_read on builds for select to crosstie_app
  using (exists (select 1 from units u where u.id = builds.unit_id));
create policy builds_add on builds for insert to crosstie_app
  with check (exists (select 1 from units u where u.id = builds.unit_id and u.programme_id = builds.programme_id
      and (u.party_id = any((select access.my_parties())::uuid[]) or u.programme_id = any((select access.lab_programmes())::uuid[]))));

create policy issues_read on issues for select to crosstie_app
  using (party_ids && (select access.my_parties())::uuid[]
      or programme_id = any((select access.programmes_as('programme-manager'))::uuid[]));
-- The link exists for the acting person and each build is one of the unit on its side. A function, because
-- the links' own policy asks for issues and the two would call each other without end.
create function access.fits_link(p_programme uuid, p_link uuid, p_build_a uuid, p_build_b uuid) returns boolean
language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from links l where l.id = p_link and l.programme_id = p_programme
    and (l.party_ids && access.my_parties() or l.programme_id = any(access.programmes_as('programme-manager'))
      or exists (select 1 from issues i where i.link_id = l.id and i.party_ids && access.my_parties()))
    and (p_build_a is null or exists (select 1 from builds b where b.id = p_build_a and b.unit_id = l.unit_a_id))
    and (p_build_b is null or exists (select 1 from builds b where b.id = p_build_b and b.unit_id = l.unit_b_id)))
$$;
create policy issues_file on issues for insert to crosstie_app
  with check (raised_by = (select access.person())
      and raised_by_party_id = any((select access.my_parties())::uuid[])
      and party_ids && (select access.my_parties())::uuid[]
      and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[])
      and access.fits_link(programme_id, link_id, build_a_id, build_b_id));
create policy issues_change on issues for update to crosstie_app
  using (programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]))
  with check (access.fits_link(programme_id, link_id, build_a_id, build_b_id));
create policy shares_read on shares for select to crosstie_app
  using (exists (select 1 from issues i where i.id = shares.issue_id));
create policy shares_add on shares for insert to crosstie_app
  with check (shared_by = (select access.person())
      and exists (select 1 from issues i where i.id = shares.issue_id and i.programme_id = shares.programme_id)
      and exists (select 1 from parties p where p.id = shares.party_id)
      and programme_id = any((select access.programmes_as('integration-engineer', 'programme-manager'))::uuid[]));

grant select on units, builds, links, issues, shares to crosstie_app;
grant insert on units, builds, links, issues, shares to crosstie_app;
grant update (title, description, severity, stage, version, build_a_id, build_b_id, transmitter, rung_downlink, rung_uplink,
  signal_path, baseline, updated_at, settled_at, decode_state) on issues to crosstie_app;

create policy issues_worker_read on issues for select to crosstie_worker using (true);
create policy issues_worker_mark on issues for update to crosstie_worker using (true) with check (true);
create policy links_worker on links for select to crosstie_worker using (true);
grant select on issues, links to crosstie_worker;
grant update (likely_code, likely_side, likely_confidence, decode_state, updated_at, stage, version) on issues to crosstie_worker;
`;
