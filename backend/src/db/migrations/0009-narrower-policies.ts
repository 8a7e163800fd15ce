/**
 * Policies that say for writes what the pages say: a statement that forgets its condition changes what
 * its person may change and nothing more, and what is written down about somebody names the one who wrote.
 */
export const up = `
-- Without a condition an update reads nothing, so that the reading policy does not narrow it: this one must.
drop policy issues_change on issues;
create policy issues_change on issues for update to crosstie_app
  using ((party_ids && (select access.my_parties())::uuid[] and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer'))::uuid[]))
    or programme_id = any((select access.programmes_as('programme-manager'))::uuid[]))
  with check (access.fits_link(programme_id, link_id, build_a_id, build_b_id));

-- A file stands on an issue only where its owner stands: it would else be read by a party that cannot see the issue.
drop policy files_attach on files;
create policy files_attach on files for update to crosstie_app
  using (uploaded_by = (select access.person()) and uploader_party_id = any((select access.my_parties())::uuid[]) and issue_id is null)
  with check (uploaded_by = (select access.person())
    and (issue_id is null or exists (select 1 from issues i where i.id = files.issue_id and i.programme_id = files.programme_id
      and (files.party_id = any(i.party_ids) or files.party_id = files.uploader_party_id))));

drop policy events_add on events;
create policy events_add on events for insert to crosstie_app with check (
  person_id = (select access.person()) and party_id = any((select access.my_parties())::uuid[])
  and programme_id = any((select access.programmes_as('integration-engineer', 'vendor-engineer', 'programme-manager'))::uuid[])
  and exists (select 1 from issues i where i.id = events.issue_id and i.programme_id = events.programme_id));
drop policy live_events_add on live_events;
create policy live_events_add on live_events for insert to crosstie_app with check (
  (party_id is null or party_id = any((select access.my_parties())::uuid[]))
  and exists (select 1 from issues i where i.id = live_events.issue_id and i.programme_id = live_events.programme_id));

-- Another party's record is written, never read: by whoever meets that party on an issue.
drop policy audit_add on audit;
create policy audit_add on audit for insert to crosstie_app with check (
  person_id = (select access.person())
  and (programme_id is null or programme_id = any((select access.my_programmes())::uuid[]))
  and (party_id is null or exists (select 1 from parties p where p.id = audit.party_id and p.programme_id = audit.programme_id)));

-- The worker ends waivers: the issue has a next move again, and its people are written to.
create policy next_moves_worker_set on next_moves for insert to crosstie_worker with check (set_by is null);
grant insert on next_moves, outbox to crosstie_worker;
`;
