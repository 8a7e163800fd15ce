/** Each writing policy asks for the roles that the table of actions asks for; a test holds the two against each other. */
export const up = `
-- A function, because the units' own policy asks for links and the two would call each other without end.
create function access.unit_is_of(p_unit uuid, p_programme uuid, p_party uuid) returns boolean
language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from units u where u.id = p_unit and u.programme_id = p_programme and u.party_id = p_party)
    and p_programme = any(access.lab_programmes())
$$;
drop policy links_add on links;
create policy links_add on links for insert to crosstie_app
  with check (programme_id = any((select access.lab_programmes())::uuid[]) and programme_id = any((select access.programmes_as('integration-engineer'))::uuid[])
      and party_ids && (select access.my_parties())::uuid[]
      and access.unit_is_of(unit_a_id, programme_id, party_a_id) and access.unit_is_of(unit_b_id, programme_id, party_b_id)
      and party_ids @> array[party_a_id, party_b_id]);
drop policy units_add on units;
create policy units_add on units for insert to crosstie_app
  with check (programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[])
      and (programme_id = any((select access.lab_programmes())::uuid[]) or party_id = any((select access.my_parties())::uuid[]))
      and exists (select 1 from parties p where p.id = units.party_id and p.programme_id = units.programme_id));
drop policy builds_add on builds;
create policy builds_add on builds for insert to crosstie_app
  with check (programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[])
      and exists (select 1 from units u where u.id = builds.unit_id and u.programme_id = builds.programme_id
        and (u.party_id = any((select access.my_parties())::uuid[]) or u.programme_id = any((select access.lab_programmes())::uuid[]))));

drop policy retests_add on retests;
create policy retests_add on retests for insert to crosstie_app with check (
  recorded_by = (select access.person())
  and programme_id = any((select access.programmes_as('integration-engineer'))::uuid[]) and programme_id = any((select access.lab_programmes())::uuid[])
  and exists (select 1 from issues i where i.id = retests.issue_id and i.programme_id = retests.programme_id
    and access.fits_link(i.programme_id, i.link_id, retests.build_a_id, retests.build_b_id))
  and (decode_id is null or exists (select 1 from decodes d where d.id = retests.decode_id and d.issue_id = retests.issue_id)));

-- A role that was taken away takes its rights to earlier words and drafts with it.
drop policy entries_change on entries;
create policy entries_change on entries for update to crosstie_app
  using (author_id = (select access.person()) and author_party_id = any((select access.my_parties())::uuid[])
    and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]))
  with check (author_id = (select access.person()) and author_party_id = any((select access.my_parties())::uuid[]));
drop policy files_attach on files;
create policy files_attach on files for update to crosstie_app
  using (uploaded_by = (select access.person()) and uploader_party_id = any((select access.my_parties())::uuid[]) and issue_id is null
    and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[]))
  with check (uploaded_by = (select access.person())
    and (issue_id is null or exists (select 1 from issues i where i.id = files.issue_id and i.programme_id = files.programme_id
      and (files.party_id = any(i.party_ids) or files.party_id = files.uploader_party_id))));

-- A manager moves an issue and weighs it; what it says is the engineers' to change.
create function access.issues_edited() returns trigger language plpgsql as $$
begin
  if current_user = 'crosstie_app'
    and (new.title, new.description, new.transmitter, new.rung_downlink, new.rung_uplink, new.signal_path, new.baseline, new.build_a_id, new.build_b_id)
      is distinct from (old.title, old.description, old.transmitter, old.rung_downlink, old.rung_uplink, old.signal_path, old.baseline, old.build_a_id, old.build_b_id)
    and not new.programme_id = any(access.programmes_as('integration-engineer', 'vendor-engineer')) then
    raise exception 'what an issue says is changed by engineers' using errcode = 'insufficient_privilege';
  end if;
  return new;
end $$;
create trigger issues_edited before update on issues for each row execute function access.issues_edited();
revoke execute on function access.issues_edited(), access.unit_is_of(uuid, uuid, uuid) from public;
grant execute on function access.unit_is_of(uuid, uuid, uuid) to crosstie_app;
`;
