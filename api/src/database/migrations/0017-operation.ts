// What operating the house needs: one sweep of everything that is kept for a time only, and which migrations were applied.
export default /* sql */ `
drop function app.sweep(timestamptz);
-- At most p_most rows of each kind at a time, so that no statement runs long; the caller repeats it until nothing is left.
create function app.sweep(p_now timestamptz, p_most integer) returns table (what text, swept bigint)
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  delete from rate_limit where ctid in (select ctid from rate_limit where window_start < p_now - interval '1 day' limit p_most);
  get diagnostics swept = row_count; what := 'rate counters'; return next;

  delete from sign_in_code where id in (select id from sign_in_code where expires_at < p_now - interval '1 day' limit p_most);
  get diagnostics swept = row_count; what := 'sign-in codes'; return next;

  delete from command where ctid in (select ctid from command where created_at < p_now - interval '30 days' limit p_most);
  get diagnostics swept = row_count; what := 'idempotency keys'; return next;

  delete from session where id in (select id from session where least(ended_at, expires_at) < p_now - interval '30 days' limit p_most);
  get diagnostics swept = row_count; what := 'ended sessions'; return next;

  delete from stripe_event where ctid in (select ctid from stripe_event where handled_at < p_now - interval '90 days' limit p_most);
  get diagnostics swept = row_count; what := 'handled payment events'; return next;

  -- that a mail went out, when and to whom stays; what stood in it goes, and the address of somebody who was only invited
  update notice set data = '{}', to_name = null, to_email = case when to_email is null then null else '' end
    where id in (select id from notice where sent_at < p_now - interval '90 days' and data <> '{}' limit p_most);
  get diagnostics swept = row_count; what := 'bodies of sent mails'; return next;
end $$;

create function app.applied_migrations() returns table (name text, sha256 text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select name, sha256 from migration
$$;

revoke all on function app.sweep, app.applied_migrations from public;
grant execute on function app.sweep to app_worker;
grant execute on function app.applied_migrations to app_read, app_worker;
`;
