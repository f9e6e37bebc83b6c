// How many invited homeowners are awaited, on many jobs at once, for the lender's queue.
export default /* sql */ `
-- app.homeowners_awaited for many jobs: what the reader may reach is asked once
create function app.homeowners_awaited_each(p_jobs uuid[]) returns table (job_id uuid, awaited integer) language plpgsql stable security definer set search_path = public, pg_temp as $$
declare jobs uuid[] := app.my_jobs(); firms uuid[] := app.my_firms();
begin
  return query select i.job_id, count(distinct i.email)::int from invitation i join job j on j.id = i.job_id
    where i.job_id = any(p_jobs) and i.role = 'homeowner' and i.accepted_at is null and i.revoked_at is null and (j.id = any(jobs) or j.firm_id = any(firms))
    group by i.job_id;
end $$;
revoke all on function app.homeowners_awaited_each from public;
grant execute on function app.homeowners_awaited_each to app_read, app_write, app_worker;
`;
