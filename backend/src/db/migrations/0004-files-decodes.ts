/** Files and what was read from them; decodes, their results by audience, hints and what people said of them. */
export const up = `
create table files (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null references programmes,
  issue_id uuid,
  entry_id uuid,
  kind text not null check (kind in ('capture', 'snapshot', 'glossary', 'attachment')),
  side text check (side in ('a', 'b')),
  name text not null check (length(name) between 1 and 255),
  size bigint not null check (size >= 0),
  sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
  storage_id uuid not null unique,
  -- What a file cannot be read without: the data of a SigMF pair, the glossary of a snapshot.
  companion_id uuid references files,
  reach text not null check (reach in ('everyone', 'my-party', 'compare-only')),
  party_id uuid not null,
  uploader_party_id uuid not null,
  uploaded_by uuid not null references people,
  uploaded_by_name text not null,
  uploaded_at timestamptz not null default now(),
  withdrawn_at timestamptz,
  options jsonb not null default '{}',
  unreadable_code text,
  unreadable_message text,
  check (reach <> 'compare-only' or kind in ('snapshot', 'glossary')),
  check (reach <> 'my-party' or party_id = uploader_party_id),
  foreign key (programme_id, issue_id) references issues (programme_id, id),
  foreign key (programme_id, party_id) references parties (programme_id, id),
  foreign key (programme_id, uploader_party_id) references parties (programme_id, id)
);
create index files_issue on files (issue_id, uploaded_at);
create index files_entry on files (entry_id);
create index files_drafts on files (uploaded_by, uploaded_at) where issue_id is null;

create table captures (
  file_id uuid primary key references files on delete cascade,
  programme_id uuid not null,
  facts jsonb not null,
  spectrum jsonb,
  warnings jsonb not null default '[]'
);
create table snapshots (
  file_id uuid primary key references files on delete cascade,
  programme_id uuid not null,
  syntax text not null,
  vocabularies jsonb not null default '[]',
  not_understood jsonb not null default '[]',
  problems jsonb not null default '[]',
  missing jsonb not null default '[]'
);
create table snapshot_parameters (
  id uuid primary key default gen_random_uuid(),
  file_id uuid not null references snapshots on delete cascade,
  programme_id uuid not null,
  parameter text not null,
  value jsonb not null,
  path text not null,
  raw text not null,
  line integer
);
create index snapshot_parameters_file on snapshot_parameters (file_id, line);
create index snapshot_parameters_raw on snapshot_parameters (lower(raw));

create table decodes (
  id uuid primary key default gen_random_uuid(),
  programme_id uuid not null,
  issue_id uuid not null,
  number integer not null,
  reach text not null check (reach in ('everyone', 'my-party')),
  party_id uuid not null,
  transmitter text check (transmitter in ('a', 'b')),
  state text not null default 'queued' check (state in ('queued', 'running', 'done', 'failed')),
  step text not null default 'waiting',
  progress double precision not null default 0 check (progress between 0 and 1),
  attempt integer not null default 0,
  leased_until timestamptz,
  engine_version text,
  error_code text,
  error_message text,
  input_withdrawn boolean not null default false,
  requested_by uuid not null references people,
  requested_by_name text not null,
  queued_at timestamptz not null default now(),
  started_at timestamptz,
  finished_at timestamptz,
  unique (programme_id, id),
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
-- Counted by reach, so that a gap cannot tell of a decode that one may not see.
create unique index decodes_numbers on decodes (issue_id, number) where reach = 'everyone';
create unique index decodes_own_numbers on decodes (issue_id, party_id, number) where reach = 'my-party';
create index decodes_issue on decodes (issue_id, queued_at);
create index decodes_open on decodes (state, leased_until) where state in ('queued', 'running');

create table decode_inputs (
  decode_id uuid not null references decodes on delete cascade,
  role text not null check (role in ('capture', 'snapshot-a', 'snapshot-b', 'glossary-a', 'glossary-b')),
  programme_id uuid not null,
  file_id uuid not null references files,
  sha256 text not null,
  primary key (decode_id, role)
);
create index decode_inputs_file on decode_inputs (file_id);

-- One complete result an audience: rows can be hidden, parts of a JSON value can not.
create table decode_results (
  id uuid primary key default gen_random_uuid(),
  decode_id uuid not null references decodes on delete cascade,
  programme_id uuid not null,
  attempt integer not null,
  audience_party_id uuid,
  result jsonb not null,
  recorded_at timestamptz not null default now(),
  unique nulls not distinct (decode_id, audience_party_id)
);
create table hints (
  id uuid primary key default gen_random_uuid(),
  decode_id uuid not null references decodes on delete cascade,
  programme_id uuid not null,
  issue_id uuid not null,
  rank integer not null,
  code text not null,
  side text not null check (side in ('a', 'b', 'both', 'capture', 'unknown')),
  confidence double precision not null check (confidence between 0 and 1),
  unique (decode_id, rank),
  foreign key (programme_id, issue_id) references issues (programme_id, id)
);
create index hints_issue on hints (issue_id, confidence);
create table hint_verdicts (
  id uuid primary key default gen_random_uuid(),
  hint_id uuid not null references hints on delete cascade,
  programme_id uuid not null,
  person_id uuid not null references people,
  person_name text not null,
  party_id uuid not null,
  party_name text not null,
  verdict text not null check (verdict in ('confirmed', 'refuted')),
  reason text not null default '',
  at timestamptz not null default now()
);
create index hint_verdicts_hint on hint_verdicts (hint_id, at);

alter table files enable row level security;
alter table captures enable row level security;
alter table snapshots enable row level security;
alter table snapshot_parameters enable row level security;
alter table decodes enable row level security;
alter table decode_inputs enable row level security;
alter table decode_results enable row level security;
alter table hints enable row level security;
alter table hint_verdicts enable row level security;

-- A draft is its uploader's alone. Filed: the owner's party, the uploader's party, and everyone on the issue where the reach says so.
create policy files_read on files for select to crosstie_app using (
  case when issue_id is null then uploaded_by = (select access.person()) and uploader_party_id = any((select access.my_parties())::uuid[])
  else party_id = any((select access.my_parties())::uuid[])
    or uploader_party_id = any((select access.my_parties())::uuid[])
    or (reach = 'everyone' and exists (select 1 from issues i where i.id = files.issue_id)) end);
create policy files_add on files for insert to crosstie_app with check (
  uploaded_by = (select access.person()) and issue_id is null and entry_id is null
  and uploader_party_id = any((select access.my_parties())::uuid[])
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[])
  and exists (select 1 from parties p where p.id = files.party_id and p.programme_id = files.programme_id));
-- Attaching a draft to an issue; reach and withdrawal go through the functions below.
create policy files_attach on files for update to crosstie_app
  using (uploaded_by = (select access.person()) and issue_id is null)
  with check (uploaded_by = (select access.person())
    and (issue_id is null or exists (select 1 from issues i where i.id = files.issue_id and i.programme_id = files.programme_id)));
create policy files_drop_draft on files for delete to crosstie_app using (uploaded_by = (select access.person()) and issue_id is null);
grant select, insert, delete on files to crosstie_app;
grant update (issue_id, entry_id, side, party_id, reach) on files to crosstie_app;

create policy captures_read on captures for select to crosstie_app using (exists (select 1 from files f where f.id = captures.file_id));
create policy captures_add on captures for insert to crosstie_app
  with check (exists (select 1 from files f where f.id = captures.file_id and f.uploaded_by = (select access.person())));
create policy snapshots_read on snapshots for select to crosstie_app using (exists (select 1 from files f where f.id = snapshots.file_id));
create policy snapshots_add on snapshots for insert to crosstie_app
  with check (exists (select 1 from files f where f.id = snapshots.file_id and f.uploaded_by = (select access.person())));
create policy snapshot_parameters_read on snapshot_parameters for select to crosstie_app using (exists (select 1 from files f where f.id = snapshot_parameters.file_id));
create policy snapshot_parameters_add on snapshot_parameters for insert to crosstie_app
  with check (exists (select 1 from files f where f.id = snapshot_parameters.file_id and f.uploaded_by = (select access.person())));
grant select, insert on captures, snapshots, snapshot_parameters to crosstie_app;

create policy decodes_read on decodes for select to crosstie_app using (
  exists (select 1 from issues i where i.id = decodes.issue_id)
  and (reach = 'everyone' or party_id = any((select access.my_parties())::uuid[])));
create policy decodes_ask on decodes for insert to crosstie_app with check (
  requested_by = (select access.person()) and state = 'queued' and attempt = 0
  and party_id = any((select access.my_parties())::uuid[])
  and exists (select 1 from issues i where i.id = decodes.issue_id and i.programme_id = decodes.programme_id)
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[]));
create policy decode_inputs_read on decode_inputs for select to crosstie_app using (
  exists (select 1 from decodes d where d.id = decode_inputs.decode_id) and exists (select 1 from files f where f.id = decode_inputs.file_id));
-- A decode for everyone may use a compare-only snapshot of another party through its veil, so the check is a function.
create function access.may_decode(p_file uuid, p_decode uuid) returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from files f join decodes d on d.id = p_decode
    where f.id = p_file and f.issue_id = d.issue_id and f.withdrawn_at is null and d.requested_by = access.person()
      and (f.reach in ('everyone', 'compare-only') or (f.party_id = any(access.my_parties()) and d.reach = 'my-party' and d.party_id = f.party_id)))
$$;
create policy decode_inputs_add on decode_inputs for insert to crosstie_app with check (access.may_decode(file_id, decode_id));
create policy decode_results_read on decode_results for select to crosstie_app using (
  exists (select 1 from decodes d where d.id = decode_results.decode_id)
  and (audience_party_id is null or audience_party_id = any((select access.my_parties())::uuid[])));
create policy hints_read on hints for select to crosstie_app using (exists (select 1 from decodes d where d.id = hints.decode_id));
create policy hint_verdicts_read on hint_verdicts for select to crosstie_app using (exists (select 1 from hints h where h.id = hint_verdicts.hint_id));
create policy hint_verdicts_add on hint_verdicts for insert to crosstie_app with check (
  person_id = (select access.person()) and party_id = any((select access.my_parties())::uuid[])
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[])
  and exists (select 1 from hints h where h.id = hint_verdicts.hint_id and h.programme_id = hint_verdicts.programme_id));
grant select, insert on decodes, decode_inputs, hint_verdicts to crosstie_app;
grant select on decode_results, hints to crosstie_app;

-- Snapshots that take part in a comparison without being shown: side and owner, nothing else.
create function access.veiled_snapshots(p_issue uuid) returns table (file_id uuid, side text, party_id uuid)
language sql stable security definer set search_path = public, pg_temp as $$
  select f.id, f.side, f.party_id from files f join issues i on i.id = f.issue_id
  where f.issue_id = p_issue and f.kind = 'snapshot' and f.reach = 'compare-only' and f.withdrawn_at is null and f.side is not null
    and (i.party_ids && access.my_parties() or i.programme_id = any(access.programmes_as('programme-manager')))
    and not (f.party_id = any(access.my_parties()) or f.uploader_party_id = any(access.my_parties()))
  order by f.uploaded_at
$$;
-- The hash of a decode's input, copied without being shown to the one who asks for the decode.
create function access.stamp_input() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  select sha256 into new.sha256 from files where id = new.file_id;
  return new;
end $$;
create trigger decode_inputs_stamp before insert on decode_inputs for each row execute function access.stamp_input();

create function access.forget_derived(p_file uuid) returns void language sql security definer set search_path = public, pg_temp as $$
  delete from decode_results r using decode_inputs n where n.decode_id = r.decode_id and n.file_id = p_file;
  delete from hints h using decode_inputs n where n.decode_id = h.decode_id and n.file_id = p_file;
  update decodes d set input_withdrawn = true from decode_inputs n where n.decode_id = d.id and n.file_id = p_file;
  update issues i set likely_code = null, likely_side = null, likely_confidence = null, decode_state = 'none'
    from files f where f.id = p_file and i.id = f.issue_id
      and not exists (select 1 from decodes d where d.issue_id = i.id and d.reach = 'everyone' and not d.input_withdrawn);
$$;
revoke execute on function access.forget_derived(uuid) from public;
-- Withdrawal by the owner's or the uploader's party. The tombstone stays; answers with the storage id to delete, or nothing.
create function access.withdraw_file(p_file uuid) returns uuid language plpgsql security definer set search_path = public, pg_temp as $$
declare gone uuid;
begin
  update files set withdrawn_at = now(), sha256 = repeat('0', 64), options = '{}', unreadable_code = null, unreadable_message = null
    where id = p_file and withdrawn_at is null and issue_id is not null
      and (party_id = any(access.my_parties()) or uploader_party_id = any(access.my_parties()))
      and programme_id = any(access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))
    returning storage_id into gone;
  if gone is null then return null; end if;
  update decode_inputs set sha256 = repeat('0', 64) where file_id = p_file;
  delete from captures where file_id = p_file;
  delete from snapshots where file_id = p_file;
  perform access.forget_derived(p_file);
  return gone;
end $$;
-- Narrowing only: everyone, then compare only (snapshots), then my party.
create function access.narrow_file(p_file uuid, p_reach text) returns boolean language plpgsql security definer set search_path = public, pg_temp as $$
declare done integer;
begin
  update files set reach = p_reach
    where id = p_file and withdrawn_at is null and issue_id is not null
      and (party_id = any(access.my_parties()) or uploader_party_id = any(access.my_parties()))
      and programme_id = any(access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))
      and ((reach = 'everyone' and p_reach in ('compare-only', 'my-party')) or (reach = 'compare-only' and p_reach = 'my-party'));
  get diagnostics done = row_count;
  if done > 0 then perform access.forget_derived(p_file); end if;
  return done > 0;
end $$;
revoke execute on all functions in schema access from public;
grant execute on all functions in schema access to crosstie_app, crosstie_worker;
revoke execute on function access.meet(uuid[]), access.forget_derived(uuid) from crosstie_app, crosstie_worker;

create policy files_worker on files for select to crosstie_worker using (true);
create policy captures_worker on captures for select to crosstie_worker using (true);
create policy snapshots_worker on snapshots for select to crosstie_worker using (true);
create policy decodes_worker on decodes for select to crosstie_worker using (true);
create policy decodes_worker_write on decodes for update to crosstie_worker using (true) with check (true);
create policy decode_inputs_worker on decode_inputs for select to crosstie_worker using (true);
create policy decode_results_worker on decode_results for all to crosstie_worker using (true) with check (true);
create policy hints_worker on hints for all to crosstie_worker using (true) with check (true);
grant select on files, captures, snapshots, decode_inputs to crosstie_worker;
grant select, update on decodes to crosstie_worker;
grant select, insert, delete on decode_results, hints to crosstie_worker;
`;
