/** What a party's files take together, and indexes for what the pages list. */
export const up = `
-- All bytes of a party, drafts of colleagues included, for a member of it.
create function access.party_bytes(p_party uuid) returns bigint language sql volatile security definer set search_path = public, pg_temp as $$
  select pg_advisory_xact_lock(hashtextextended('crosstie.quota.' || p_party, 0));
  select coalesce(sum(size), 0)::bigint from files where uploader_party_id = p_party and withdrawn_at is null and p_party = any(access.my_parties())
$$;
revoke execute on function access.party_bytes(uuid) from public;
grant execute on function access.party_bytes(uuid) to crosstie_app;
create index files_uploader on files (uploader_party_id) where withdrawn_at is null;
create index files_companion on files (companion_id) where companion_id is not null;
`;
