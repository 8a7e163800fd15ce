/** Thread, history, next moves, stages as intervals, retests, waivers, followers, looks, saved views. */
export const up = `
create table entries (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  author_id uuid not null references people,
  author_name text not null,
  author_party_id uuid not null,
  author_party_name text not null,
  body text not null check (length(body) <= 50000),
  reach text not null check (reach in ('everyone', 'my-party')),
  at timestamptz not null default now(),
  edited_at timestamptz,
  withdrawn_at timestamptz,
  words tsvector generated always as (to_tsvector('simple', body)) stored,
  unique (programme_id, id),
  foreign key (programme_id, issue_id) references issues (programme_id, id),
  foreign key (programme_id, author_party_id) references parties (programme_id, id)
);
create index entries_issue on entries (issue_id, at);
create index entries_words on entries using gin (words);
alter table files add foreign key (programme_id, entry_id) references entries (programme_id, id);
create table entry_versions (
  id uuid primary key default gen_random_uuid(),
  entry_id uuid not null references entries on delete cascade,
  programme_id uuid not null,
  body text not null,
  at timestamptz not null default now()
);
create index entry_versions_entry on entry_versions (entry_id, at);

create table events (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  at timestamptz not null default now(),
  person_id uuid references people,
  person_name text,
  party_id uuid,
  party_name text,
  kind text not null,
  text text not null,
  side text check (side in ('a', 'b')),
  reach text not null default 'everyone' check (reach in ('everyone', 'my-party')),
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
create index events_issue on events (issue_id, at);
create index events_at on events (programme_id, at);

create table next_moves (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  party_id uuid not null,
  ask text not null check (length(ask) between 1 and 500),
  cause text not null check (cause in ('side-a', 'side-b', 'lab', 'rig-away')),
  since timestamptz not null default now(),
  due date,
  ended_at timestamptz,
  set_by uuid references people,
  foreign key (programme_id, issue_id) references issues (programme_id, id),
  foreign key (programme_id, party_id) references parties (programme_id, id)
);
create unique index next_moves_current on next_moves (issue_id) where ended_at is null;
create index next_moves_issue on next_moves (issue_id, since);
create index next_moves_party on next_moves (party_id, ended_at);
create table stage_intervals (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  stage text not null,
  since timestamptz not null default now(),
  ended_at timestamptz,
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
create index stage_intervals_issue on stage_intervals (issue_id, since);
create index stage_intervals_flow on stage_intervals (programme_id, stage, since);

create table retests (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  decode_id uuid,
  build_a_id uuid not null,
  build_b_id uuid not null,
  outcome text not null check (outcome in ('clean', 'failed')),
  note text not null default '',
  rung_downlink text,
  rung_uplink text,
  recorded_by uuid not null references people,
  recorded_by_name text not null,
  at timestamptz not null default now(),
  -- A clean retest rests on a decode: nobody's click settles an issue.
  check (outcome = 'failed' or decode_id is not null),
  foreign key (programme_id, issue_id) references issues (programme_id, id),
  foreign key (programme_id, decode_id) references decodes (programme_id, id),
  foreign key (programme_id, build_a_id) references builds (programme_id, id),
  foreign key (programme_id, build_b_id) references builds (programme_id, id)
);
create index retests_issue on retests (issue_id, at);
create table waivers (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  reason text not null check (length(reason) between 1 and 2000),
  ends_on date not null,
  asked_by uuid not null references people,
  at timestamptz not null default now(),
  returned_at timestamptz,
  unique (programme_id, id),
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
create index waivers_issue on waivers (issue_id, at);
create index waivers_end on waivers (ends_on) where returned_at is null;
create table waiver_signatures (
  waiver_id uuid not null references waivers on delete cascade,
  party_id uuid not null references parties,
  programme_id uuid not null,
  person_id uuid not null references people,
  person_name text not null,
  at timestamptz not null default now(),
  primary key (waiver_id, party_id)
);
create table followers (
  issue_id uuid not null,
  programme_id uuid not null,
  person_id uuid not null references people,
  party_id uuid not null references parties,
  since timestamptz not null default now(),
  primary key (issue_id, person_id),
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
create index followers_person on followers (person_id);
create table looks (
  person_id uuid not null references people,
  issue_id uuid not null references issues,
  at timestamptz not null default now(),
  primary key (person_id, issue_id)
);
create table saved_views (
  id uuid primary key default gen_random_uuid(),
  person_id uuid not null references people,
  name text not null check (length(name) between 1 and 60),
  query text not null check (length(query) <= 2000),
  at timestamptz not null default now()
);
create index saved_views_person on saved_views (person_id, name);

create function access.moves_mark() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update issues i set (move_party_id, move_since, move_due) = (
    select n.party_id, n.since, n.due from (select 1) one left join next_moves n on n.issue_id = i.id and n.ended_at is null)
    where i.id = new.issue_id;
  return new;
end $$;
create trigger next_moves_mark after insert or update on next_moves for each row execute function access.moves_mark();
create function access.stages_keep() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if tg_op = 'UPDATE' then
    if new.stage = old.stage then return new; end if;
    update stage_intervals set ended_at = now() where issue_id = new.id and ended_at is null;
  end if;
  insert into stage_intervals (programme_id, issue_id, stage, since)
    values (new.programme_id, new.id, new.stage, case when tg_op = 'INSERT' then new.raised_at else now() end);
  return new;
end $$;
create trigger issues_stages after insert or update of stage on issues for each row execute function access.stages_keep();

alter table entries enable row level security;
alter table entry_versions enable row level security;
alter table events enable row level security;
alter table next_moves enable row level security;
alter table stage_intervals enable row level security;
alter table retests enable row level security;
alter table waivers enable row level security;
alter table waiver_signatures enable row level security;
alter table followers enable row level security;
alter table looks enable row level security;
alter table saved_views enable row level security;

create policy entries_read on entries for select to crosstie_app using (
  exists (select 1 from issues i where i.id = entries.issue_id)
  and (reach = 'everyone' or author_party_id = any((select access.my_parties())::uuid[])));
create policy entries_write on entries for insert to crosstie_app with check (
  author_id = (select access.person()) and author_party_id = any((select access.my_parties())::uuid[])
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[])
  and exists (select 1 from issues i where i.id = entries.issue_id and i.programme_id = entries.programme_id));
create policy entries_change on entries for update to crosstie_app
  using (author_id = (select access.person()) and author_party_id = any((select access.my_parties())::uuid[]))
  with check (author_id = (select access.person()) and author_party_id = any((select access.my_parties())::uuid[]));
create policy entry_versions_read on entry_versions for select to crosstie_app using (exists (select 1 from entries e where e.id = entry_versions.entry_id));
create policy entry_versions_add on entry_versions for insert to crosstie_app
  with check (exists (select 1 from entries e where e.id = entry_versions.entry_id and e.author_id = (select access.person())));
create policy entry_versions_withdraw on entry_versions for delete to crosstie_app
  using (exists (select 1 from entries e where e.id = entry_versions.entry_id and e.author_id = (select access.person())));
create policy events_read on events for select to crosstie_app using (
  exists (select 1 from issues i where i.id = events.issue_id)
  and (reach = 'everyone' or party_id = any((select access.my_parties())::uuid[])));
create policy events_add on events for insert to crosstie_app with check (
  person_id = (select access.person()) and exists (select 1 from issues i where i.id = events.issue_id and i.programme_id = events.programme_id));
create policy next_moves_read on next_moves for select to crosstie_app using (exists (select 1 from issues i where i.id = next_moves.issue_id));
create policy next_moves_add on next_moves for insert to crosstie_app with check (
  set_by = (select access.person()) and exists (select 1 from issues i where i.id = next_moves.issue_id and next_moves.party_id = any(i.party_ids))
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]));
create policy next_moves_end on next_moves for update to crosstie_app
  using (exists (select 1 from issues i where i.id = next_moves.issue_id)
    and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]))
  with check (ended_at is not null);
create policy stage_intervals_read on stage_intervals for select to crosstie_app using (exists (select 1 from issues i where i.id = stage_intervals.issue_id));
create policy retests_read on retests for select to crosstie_app using (exists (select 1 from issues i where i.id = retests.issue_id));
create policy retests_add on retests for insert to crosstie_app with check (
  recorded_by = (select access.person())
  and programme_id = any((select access.programmes_as('integration-engineer'))::uuid[])
  and exists (select 1 from issues i where i.id = retests.issue_id and i.programme_id = retests.programme_id)
  and exists (select 1 from builds b where b.id = retests.build_a_id) and exists (select 1 from builds b where b.id = retests.build_b_id)
  and (decode_id is null or exists (select 1 from decodes d where d.id = retests.decode_id and d.issue_id = retests.issue_id)));
create policy waivers_read on waivers for select to crosstie_app using (exists (select 1 from issues i where i.id = waivers.issue_id));
create policy waivers_ask on waivers for insert to crosstie_app with check (
  asked_by = (select access.person()) and exists (select 1 from issues i where i.id = waivers.issue_id and i.programme_id = waivers.programme_id)
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]));
create policy signatures_read on waiver_signatures for select to crosstie_app using (exists (select 1 from waivers w where w.id = waiver_signatures.waiver_id));
create policy signatures_sign on waiver_signatures for insert to crosstie_app with check (
  person_id = (select access.person()) and party_id = any((select access.my_parties())::uuid[])
  and exists (select 1 from waivers w join issues i on i.id = w.issue_id join links l on l.id = i.link_id
    where w.id = waiver_signatures.waiver_id and w.programme_id = waiver_signatures.programme_id and waiver_signatures.party_id in (l.party_a_id, l.party_b_id))
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]));
create policy followers_read on followers for select to crosstie_app using (party_id = any((select access.my_parties())::uuid[]));
create policy followers_add on followers for insert to crosstie_app with check (
  person_id = (select access.person()) and party_id = any((select access.my_parties())::uuid[])
  and exists (select 1 from issues i where i.id = followers.issue_id and i.programme_id = followers.programme_id));
create policy followers_drop on followers for delete to crosstie_app using (person_id = (select access.person()));
create policy looks_mine on looks for all to crosstie_app using (person_id = (select access.person()))
  with check (person_id = (select access.person()) and exists (select 1 from issues i where i.id = looks.issue_id));
create policy saved_views_mine on saved_views for all to crosstie_app using (person_id = (select access.person())) with check (person_id = (select access.person()));

grant select, insert on entries, entry_versions, events, next_moves, retests, waivers, waiver_signatures, followers to crosstie_app;
grant select on stage_intervals to crosstie_app;
grant delete on entry_versions, followers to crosstie_app;
grant update (body, edited_at, withdrawn_at) on entries to crosstie_app;
grant update (ended_at) on next_moves to crosstie_app;
grant select, insert, update, delete on looks, saved_views to crosstie_app;

create policy events_worker on events for insert to crosstie_worker with check (person_id is null);
create policy next_moves_worker on next_moves for select to crosstie_worker using (true);
create policy waivers_worker on waivers for select to crosstie_worker using (true);
create policy waivers_worker_return on waivers for update to crosstie_worker using (true) with check (true);
grant insert on events to crosstie_worker;
grant select on next_moves, waivers to crosstie_worker;
grant update (returned_at) on waivers to crosstie_worker;
revoke execute on function access.moves_mark(), access.stages_keep() from public;
`;
