/**
 * What follows from a file follows the file: narrowed, withdrawn and dropped files take their bytes,
 * readings and results with them, and a decode that may go on runs again under the narrower reach.
 */
export const up = `
-- One lock for all that derives from an issue's files: numbers of decodes, storing a result, forgetting one.
create function access.lock_issue(p_issue uuid) returns void language sql security definer set search_path = public, pg_temp as $$
  select pg_advisory_xact_lock(hashtextextended('crosstie.issue.' || p_issue, 0))
$$;

-- Bytes that must go, written in the transaction that drops or withdraws their file; the worker makes sure.
create table discarded_bytes (
  storage_id uuid primary key,
  at timestamptz not null default now()
);
alter table discarded_bytes enable row level security;
create policy discarded_bytes_worker on discarded_bytes for all to crosstie_worker using (true) with check (true);
grant select, delete on discarded_bytes to crosstie_worker;
create function access.discard_bytes() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  insert into discarded_bytes (storage_id) values (old.storage_id) on conflict do nothing;
  return null;
end $$;
create trigger files_dropped after delete on files for each row execute function access.discard_bytes();
create trigger files_withdrawn after update of withdrawn_at on files for each row
  when (old.withdrawn_at is null and new.withdrawn_at is not null) execute function access.discard_bytes();
create policy files_worker_sweep on files for delete to crosstie_worker using (issue_id is null and uploaded_at < now() - interval '1 day');
grant delete on files to crosstie_worker;

-- A capture is used as a capture and a snapshot as its own side's: one compare-only file laid beside itself
-- would be told value by value, and its bytes read as samples would be shown as a plot.
drop policy decode_inputs_add on decode_inputs;
drop function access.may_decode(uuid, uuid);
create function access.may_decode(p_file uuid, p_decode uuid, p_role text) returns boolean
language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from files f join decodes d on d.id = p_decode
    where f.id = p_file and f.issue_id = d.issue_id and f.withdrawn_at is null and d.requested_by = access.person() and d.state = 'queued'
      and case when p_role = 'capture' then f.kind = 'capture'
        when p_role in ('snapshot-a', 'snapshot-b') then f.kind = 'snapshot'
          and (f.side = right(p_role, 1) or (f.side is null and (f.reach = 'everyone' or f.party_id = any(access.my_parties()))))
        else false end
      and (f.reach in ('everyone', 'compare-only') or (f.party_id = any(access.my_parties()) and d.reach = 'my-party' and d.party_id = f.party_id)))
$$;
create policy decode_inputs_add on decode_inputs for insert to crosstie_app with check (access.may_decode(file_id, decode_id, role));

create function access.queue_job(p_decode uuid) returns void language sql security definer set search_path = public, pgboss, pg_temp as $$
  insert into pgboss.job (name, data, retry_limit, retry_delay, expire_in, policy)
    select 'decode', jsonb_build_object('decodeId', p_decode), q.retry_limit, q.retry_delay, q.expire_seconds * interval '1 second', q.policy
    from pgboss.queue q where q.name = 'decode'
$$;
create or replace function access.enqueue_decode(p_decode uuid) returns void language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if not exists (select 1 from decodes d where d.id = p_decode and d.state = 'queued' and d.requested_by = access.person()) then
    raise exception 'no such decode' using errcode = 'insufficient_privilege';
  end if;
  perform access.queue_job(p_decode);
end $$;

-- The register shows the latest decode for everyone whose files all stand.
create function access.mark_likely(p_issue uuid) returns void language sql security definer set search_path = public, pg_temp as $$
  update issues i set (decode_state, likely_code, likely_side, likely_confidence) = (
    select case when d.id is null then 'none' when d.state in ('queued', 'running') then 'running' when d.state = 'failed' then 'failed'
        when h.id is null then 'clean' else 'hint' end,
      case when d.state = 'done' then h.code end, case when d.state = 'done' then h.side end, case when d.state = 'done' then h.confidence end
    from (select 1) one
    left join lateral (select * from decodes d where d.issue_id = p_issue and d.reach = 'everyone' and not d.input_withdrawn order by d.queued_at desc limit 1) d on true
    left join lateral (select * from hints h where h.decode_id = d.id order by h.rank limit 1) h on true)
  where i.id = p_issue
$$;

drop function access.withdraw_file(uuid);
drop function access.narrow_file(uuid, text);
drop function access.forget_derived(uuid);

-- Results and hints of decodes that used one of the files go, and the decodes say so; a party that keeps
-- the file keeps its own decodes of it.
create function access.forget_derived(p_issue uuid, p_files uuid[], p_keeper uuid) returns void
language plpgsql security definer set search_path = public, pg_temp as $$
declare used uuid[];
begin
  select coalesce(array_agg(distinct d.id), '{}') into used from decodes d join decode_inputs n on n.decode_id = d.id
    where n.file_id = any(p_files) and (d.reach = 'everyone' or d.party_id is distinct from p_keeper);
  delete from decode_results where decode_id = any(used);
  delete from hints where decode_id = any(used);
  update decodes set input_withdrawn = true,
    error_code = case when state in ('queued', 'running') then 'input-withdrawn' else error_code end,
    error_message = case when state in ('queued', 'running') then 'A file of this decode was withdrawn, or its reach narrowed, before the decode ended. Ask for a new one.' else error_message end,
    finished_at = case when state in ('queued', 'running') then now() else finished_at end,
    leased_until = null, state = case when state in ('queued', 'running') then 'failed' else state end
    where id = any(used);
  perform access.mark_likely(p_issue);
end $$;

-- Decodes whose file is shown to fewer people now, but still takes part: their results are made again. The
-- hints stay, so that what people said of them stays; without a result nobody is shown one.
create function access.decode_again(p_issue uuid, p_file uuid) returns void
language plpgsql security definer set search_path = public, pg_temp as $$
declare again uuid;
begin
  for again in select distinct d.id from decodes d join decode_inputs n on n.decode_id = d.id
    where n.file_id = p_file and d.state = 'done' and not d.input_withdrawn
  loop
    delete from decode_results where decode_id = again;
    update decodes set state = 'queued', step = 'waiting', progress = 0, finished_at = null, leased_until = null where id = again;
    perform access.queue_job(again);
  end loop;
  perform access.mark_likely(p_issue);
end $$;

-- A file with what it is one recording with: the data of a SigMF pair and its metadata.
create function access.recording_of(p_file uuid) returns uuid[] language sql stable security definer set search_path = public, pg_temp as $$
  select array_agg(f.id) from files f join files o on o.id = p_file
  where f.id = o.id or (o.kind = 'capture' and f.kind = 'capture' and (f.id = o.companion_id or f.companion_id = o.id))
$$;

-- Withdrawal by the owner's or the uploader's party; the tombstones stay. Answers with the storage ids to delete.
create function access.withdraw_file(p_file uuid) returns setof uuid language plpgsql security definer set search_path = public, pg_temp as $$
declare
  asked files%rowtype;
  gone uuid[];
begin
  select * into asked from files f where f.id = p_file and f.withdrawn_at is null and f.issue_id is not null
    and (f.party_id = any(access.my_parties()) or f.uploader_party_id = any(access.my_parties()))
    and f.programme_id = any(access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'));
  if asked.id is null then return; end if;
  perform access.lock_issue(asked.issue_id);
  gone := access.recording_of(p_file);
  -- A glossary goes with the last snapshot that was read with it.
  if asked.kind = 'snapshot' and asked.companion_id is not null
    and not exists (select 1 from files f where f.companion_id = asked.companion_id and f.id <> p_file and f.withdrawn_at is null) then
    gone := gone || asked.companion_id;
  end if;
  -- What was read with a withdrawn glossary goes too; the snapshot itself stays.
  if asked.kind = 'glossary' then
    delete from snapshots s using files f where f.id = s.file_id and f.companion_id = p_file;
    perform access.forget_derived(asked.issue_id, array(select id from files where companion_id = p_file), null);
    update files set companion_id = null, unreadable_code = 'glossary-withdrawn',
      unreadable_message = 'The glossary that this snapshot was read with has been withdrawn. Upload the snapshot again, with its glossary or without.'
      where companion_id = p_file and withdrawn_at is null;
  end if;
  delete from captures where file_id = any(gone);
  delete from snapshots where file_id = any(gone);
  perform access.forget_derived(asked.issue_id, gone, null);
  update decode_inputs set sha256 = repeat('0', 64) where file_id = any(gone);
  return query update files set withdrawn_at = now(), sha256 = repeat('0', 64), options = '{}', unreadable_code = null, unreadable_message = null
    where id = any(gone) and withdrawn_at is null returning storage_id;
end $$;

-- Narrowing only: everyone, then compare only (snapshots), then my party. What was sent for another party is
-- narrowed to that party by its own people alone, and leaves the sender's reach then.
create function access.narrow_file(p_file uuid, p_reach text) returns boolean language plpgsql security definer set search_path = public, pg_temp as $$
declare
  asked files%rowtype;
  narrowed uuid[];
begin
  select * into asked from files f where f.id = p_file and f.withdrawn_at is null and f.issue_id is not null
    and (f.party_id = any(access.my_parties()) or (f.uploader_party_id = any(access.my_parties()) and p_reach <> 'my-party'))
    and f.programme_id = any(access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))
    and ((f.reach = 'everyone' and p_reach in ('compare-only', 'my-party')) or (f.reach = 'compare-only' and p_reach = 'my-party'))
    and (p_reach = 'my-party' or f.kind in ('snapshot', 'glossary'));
  if asked.id is null then return false; end if;
  perform access.lock_issue(asked.issue_id);
  narrowed := access.recording_of(p_file);
  if asked.kind = 'snapshot' and asked.companion_id is not null then narrowed := narrowed || asked.companion_id; end if;
  update files set reach = p_reach, uploader_party_id = case when p_reach = 'my-party' then party_id else uploader_party_id end
    where id = any(narrowed) and party_id = asked.party_id and reach <> 'my-party' and (id = p_file or reach = 'everyone' or p_reach = 'my-party');
  if p_reach = 'my-party' then perform access.forget_derived(asked.issue_id, narrowed, asked.party_id);
  else perform access.decode_again(asked.issue_id, p_file); end if;
  return true;
end $$;

revoke execute on all functions in schema access from public;
revoke execute on function access.queue_job(uuid), access.mark_likely(uuid), access.forget_derived(uuid, uuid[], uuid), access.decode_again(uuid, uuid),
  access.recording_of(uuid), access.discard_bytes() from crosstie_app, crosstie_worker;
grant update (rank, confidence) on hints to crosstie_worker;
grant execute on function access.lock_issue(uuid), access.mark_likely(uuid), access.queue_job(uuid) to crosstie_worker;
grant execute on function access.lock_issue(uuid), access.may_decode(uuid, uuid, text), access.withdraw_file(uuid), access.narrow_file(uuid, text) to crosstie_app;
`;
