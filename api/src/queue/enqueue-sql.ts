/**
 * The application's only door to the queue, made by the queue's owner: a job joins the business transaction that asks for it.
 * Job keys make an enqueue repeatable.
 */
export const enqueueSql = /* sql */ `
create or replace function graphile_worker.enqueue(task text, payload json, key text default null, run_at timestamptz default null) returns void
  language sql security definer set search_path = graphile_worker, pg_temp as
  $$ select graphile_worker.add_job(task, payload, job_key => key, run_at => run_at, max_attempts => 12) $$;
revoke all on function graphile_worker.enqueue from public;
-- how long the oldest job that is due has waited for a worker: says whether any works
create or replace function graphile_worker.waiting_seconds() returns integer
  language sql stable security definer set search_path = graphile_worker, pg_temp as
  $$ select coalesce(greatest(0, extract(epoch from now() - min(run_at)))::integer, 0) from graphile_worker._private_jobs where is_available and run_at <= now() $$;
revoke all on function graphile_worker.waiting_seconds from public;
grant usage on schema graphile_worker to app_write, app_worker;
grant execute on function graphile_worker.enqueue, graphile_worker.waiting_seconds to app_write, app_worker;
`;
