/** A page that resumes learns when more was missed than can be told, so that it reads everything again. */
export const up = `
-- What a reader missed after a given event, in order; null alone when the event is gone or too much was missed.
create or replace function access.missed_events(p_after uuid) returns setof uuid language plpgsql stable security definer set search_path = public, pg_temp as $$
declare
  known bigint;
  missed uuid[];
begin
  select place into known from live_events where id = p_after;
  missed := array(select e.id from live_events e where e.place > known order by e.place limit 201);
  if known is null or cardinality(missed) > 200 then return next null; return; end if;
  return query select unnest(missed);
end $$;
`;
