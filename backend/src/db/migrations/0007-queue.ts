import PgBoss from 'pg-boss';

/**
 * The job queue, installed as owner because it creates partitions; at run time pg-boss migrates
 * nothing. The application only enqueues, through one function, in the transaction that files.
 */
const installed = PgBoss.getConstructionPlans('pgboss').replace(/^\s*BEGIN;/, '').replace(/COMMIT;\s*$/, '');

export const up = `
${installed}
select pgboss.create_queue('decode', '{"policy": "standard", "retryLimit": 3, "retryDelay": 2, "retryBackoff": false, "expireInSeconds": 900, "retentionMinutes": 20160}'::json);
grant usage on schema pgboss to crosstie_worker;
grant select, insert, update, delete on all tables in schema pgboss to crosstie_worker;
grant execute on all functions in schema pgboss to crosstie_worker;

create function access.enqueue_decode(p_decode uuid) returns void language plpgsql security definer set search_path = public, pgboss, pg_temp as $$
begin
  if not exists (select 1 from decodes d where d.id = p_decode and d.state = 'queued' and d.requested_by = access.person()) then
    raise exception 'no such decode' using errcode = 'insufficient_privilege';
  end if;
  insert into pgboss.job (name, data, retry_limit, retry_delay, expire_in, policy)
    select 'decode', jsonb_build_object('decodeId', p_decode), q.retry_limit, q.retry_delay, q.expire_seconds * interval '1 second', q.policy
    from pgboss.queue q where q.name = 'decode';
end $$;
revoke execute on function access.enqueue_decode(uuid) from public;
grant execute on function access.enqueue_decode(uuid) to crosstie_app;
`;
