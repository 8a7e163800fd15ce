/** A page that resumes hears also what was begun before the last event that it heard, and committed after it. */
export const up = `
alter table live_events
  add column xact xid8 not null default pg_current_xact_id(),
  add column seen pg_snapshot not null default pg_current_snapshot();
create index live_events_xact on live_events (xact);

-- Places are drawn before the commit, so they tell no order of commits. What had not committed when the
-- event that was heard was written is what may have been missed; some of it may be heard twice, nothing is
-- left out. An event of the same transaction is told in the order of its places. Null alone when the
-- event is gone or too much was missed.
create or replace function access.missed_events(p_after uuid) returns setof uuid language plpgsql stable security definer set search_path = public, pg_temp as $$
declare
  heard live_events;
  missed uuid[];
begin
  select * into heard from live_events where id = p_after;
  missed := array(
    select e.id from live_events e
    where e.xact >= pg_snapshot_xmin(heard.seen)
      and case when e.xact = heard.xact then e.place > heard.place else not pg_visible_in_snapshot(e.xact, heard.seen) end
    order by e.place limit 201);
  if heard.id is null or cardinality(missed) > 200 then return next null; return; end if;
  return query select unnest(missed);
end $$;
`;
