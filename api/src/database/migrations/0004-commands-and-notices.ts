// Idempotency, the outbox, rate limits, and what belongs to the firm alone.
export default /* sql */ `
create table command (
  actor_id uuid not null references person (id),
  operation text not null,
  key uuid not null,
  input_hash bytea not null,
  answer text,
  created_at timestamptz(3) not null default now(),
  primary key (actor_id, operation, key)
);
alter table command enable row level security;
alter table command force row level security;
create policy own on command using (actor_id = (select app.actor()));
grant select, insert, update (answer) on command to app_write, app_worker;

-- The last statement of every command: it stores the answer and lets deferred constraints speak while the transaction can still be rolled back.
create function app.answer(p_actor uuid, p_operation text, p_key uuid, p_answer text) returns void language plpgsql as $$
begin
  update command set answer = p_answer where actor_id = p_actor and operation = p_operation and key = p_key;
  set constraints all immediate;
end $$;

create table notice (
  id uuid primary key,
  firm_id uuid not null references firm (id),
  job_id uuid,
  kind text not null,
  person_id uuid references person (id),
  -- only for invitations, whose receiver may not be a person here yet
  to_email text,
  to_name text,
  data jsonb not null,
  created_at timestamptz(3) not null,
  sent_at timestamptz(3),
  foreign key (firm_id, job_id) references job (firm_id, id),
  check ((person_id is null) <> (to_email is null))
);
create index on notice (firm_id, created_at);
alter table notice enable row level security;
alter table notice force row level security;
create policy firm_or_writer on notice using (firm_id = any((select app.my_firms())::uuid[]));
-- a homeowner's act notifies the firm and the lender: rows of my jobs may be written, not read
create policy written_by_anyone_on_the_job on notice for insert with check (job_id = any((select app.my_jobs())::uuid[]));
grant select on notice to app_worker;
grant insert on notice to app_write, app_worker;
grant update (sent_at) on notice to app_worker;

-- where a mail goes; only the worker may ask
create function app.mail_address(p_person uuid) returns table (email text, name text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select email, name from person where id = p_person and email is not null and deactivated_at is null
$$;

create unlogged table rate_limit (
  key text not null,
  window_start timestamptz(0) not null,
  hits integer not null,
  primary key (key, window_start)
);
-- counts outside the caller's transaction would be better still; a refused request is rolled back with its count, so callers commit it first
create function app.hit(p_key text, p_seconds integer, p_now timestamptz) returns integer
  language sql security definer set search_path = public, pg_temp as $$
  insert into rate_limit as r (key, window_start, hits)
    values (p_key, to_timestamp(floor(extract(epoch from p_now) / p_seconds) * p_seconds), 1)
    on conflict (key, window_start) do update set hits = r.hits + 1
    returning hits
$$;
create function app.sweep(p_now timestamptz) returns void language sql security definer set search_path = public, pg_temp as $$
  delete from rate_limit where window_start < p_now - interval '1 day';
  delete from command where created_at < p_now - interval '30 days';
$$;

-- how this firm prices: nobody outside it may read this
create table firm_pricing (
  firm_id uuid primary key references firm (id),
  terms jsonb not null,
  version integer not null default 1,
  updated_at timestamptz(3) not null
);
alter table firm_pricing enable row level security;
alter table firm_pricing force row level security;
create policy firm_only on firm_pricing using (firm_id = any((select app.my_firms())::uuid[]));
grant select on firm_pricing to app_read, app_write, app_worker;
grant insert, update on firm_pricing to app_write;

revoke all on function app.answer, app.mail_address, app.hit, app.sweep from public;
grant execute on function app.answer to app_write, app_worker;
grant execute on function app.mail_address, app.sweep to app_worker;
grant execute on function app.hit to app_write;
`;
