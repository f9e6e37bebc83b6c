// Jobs, who is on them, and invitations. A row's firm is the builder of the job.
export default /* sql */ `
create table job (
  id uuid primary key,
  firm_id uuid not null references firm (id),
  name text not null check (length(name) between 2 and 120),
  street text not null,
  city text not null,
  state char(2) not null,
  zip text not null,
  time_zone text not null,
  latitude double precision check (latitude between -90 and 90),
  longitude double precision check (longitude between -180 and 180),
  style text not null check (style in ('percent_complete', 'milestone_sums', 'cost_plus')),
  contract_sum_cents app.cents not null check (contract_sum_cents > 0),
  signed_on date not null,
  start_on date not null,
  complete_by date not null check (complete_by > start_on),
  day_kind text not null check (day_kind in ('calendar', 'working')),
  retainage_rate app.rate not null,
  deposit_cents app.cents not null check (deposit_cents between 0 and contract_sum_cents),
  review_days smallint not null check (review_days between 0 and 60),
  payment_days smallint not null check (payment_days between 0 and 120),
  late_rate app.rate not null,
  homeowners_sign text not null check (homeowners_sign in ('one', 'all')),
  open_book boolean not null,
  -- kept with each approval under the job's lock
  changes_approved_cents app.cents not null default 0,
  days_approved integer not null default 0,
  last_change_number integer not null default 0,
  last_draw_number integer not null default 0,
  version integer not null default 1,
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  check (contract_sum_cents + changes_approved_cents >= 0),
  unique (firm_id, id)
);
create index on job (firm_id, created_at desc, id desc);

create table job_member (
  firm_id uuid not null,
  job_id uuid not null,
  person_id uuid not null references person (id),
  role text not null check (role in ('homeowner', 'lender', 'inspector', 'designer')),
  created_at timestamptz(3) not null,
  ended_at timestamptz(3),
  primary key (job_id, person_id, role),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create index on job_member (person_id);

create table invitation (
  id uuid primary key,
  firm_id uuid not null,
  job_id uuid not null,
  email text not null check (email = lower(email)),
  name text not null,
  role text not null check (role in ('homeowner', 'lender', 'inspector', 'designer')),
  invited_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  accepted_at timestamptz(3),
  accepted_by uuid references person (id),
  revoked_at timestamptz(3),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create unique index one_open_invitation on invitation (job_id, email, role) where accepted_at is null and revoked_at is null;
create index on invitation (email) where accepted_at is null and revoked_at is null;
create index on invitation (job_id);

create trigger forget_kept after insert or update or delete on job_member for each statement execute function app.forget_kept();

create function app.find_my_jobs() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp as $$
declare me uuid := app.actor();
begin
  return app.keep('jobs', (select coalesce(array_agg(distinct job_id), '{}') from job_member where person_id = me and ended_at is null));
end $$;

create function app.my_jobs() returns uuid[] language sql stable as $$
  select case when starts_with(current_setting('app.kept_jobs', true), nullif(current_setting('app.actor', true), ''))
    then substr(current_setting('app.kept_jobs', true), 37)::uuid[] else app.find_my_jobs() end
$$;

-- the people I share a firm or a job with, in either direction
create function app.find_my_people() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp as $$
declare me uuid := app.actor(); firms uuid[] := app.my_firms(); jobs uuid[] := app.my_jobs();
begin
  return app.keep('people', (
    with reached as (select id, firm_id from job where firm_id = any(firms) or id = any(jobs))
    select coalesce(array_agg(distinct p), '{}') from (
      select me as p
      union select m.person_id from firm_member m where m.firm_id = any(firms) or m.firm_id in (select firm_id from reached)
      union select m.person_id from job_member m where m.job_id in (select id from reached)) x));
end $$;

create function app.my_people() returns uuid[] language sql stable as $$
  select case when starts_with(current_setting('app.kept_people', true), nullif(current_setting('app.actor', true), ''))
    then substr(current_setting('app.kept_people', true), 37)::uuid[] else app.find_my_people() end
$$;

-- one trip instead of three: is the session alive, who acts, and as what on this job
create function app.act_on_job(p_session uuid, p_person uuid, p_now timestamptz, p_job uuid) returns text[]
  language plpgsql security definer set search_path = public, pg_temp as $$
declare roles text[];
begin
  perform app.act_as(p_session, p_person, p_now);
  select array_agg(role) into roles from (
    select m.role from job j join firm_member m on m.firm_id = j.firm_id where j.id = p_job and m.person_id = p_person
    union select role from job_member where job_id = p_job and person_id = p_person and ended_at is null) r;
  return coalesce(roles, '{}');
end $$;

create function app.my_roles(p_job uuid) returns text[] language sql stable security definer set search_path = public, pg_temp as $$
  select coalesce(array_agg(role), '{}') from (
    select m.role from job j join firm_member m on m.firm_id = j.firm_id where j.id = p_job and m.person_id = app.actor()
    union select role from job_member where job_id = p_job and person_id = app.actor() and ended_at is null) r
$$;

alter table firm enable row level security;
alter table firm force row level security;
create policy mine on firm using (id = any((select app.my_firms())::uuid[])
  or exists (select 1 from job j where j.firm_id = firm.id and j.id = any((select app.my_jobs())::uuid[])));
alter table person enable row level security;
alter table person force row level security;
create policy known on person using (id = any((select app.my_people())::uuid[]));
alter table job enable row level security;
alter table job force row level security;
create policy job_data on job using (firm_id = any((select app.my_firms())::uuid[]) or id = any((select app.my_jobs())::uuid[]));
alter table job_member enable row level security;
alter table job_member force row level security;
create policy job_data on job_member using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]));
alter table invitation enable row level security;
alter table invitation force row level security;
create policy firm_only on invitation using (firm_id = any((select app.my_firms())::uuid[]));

grant select on job, job_member, invitation to app_read, app_write, app_worker;
grant insert, update on job, invitation to app_write, app_worker;
revoke all on function app.my_jobs, app.find_my_jobs, app.my_people, app.find_my_people, app.act_on_job, app.my_roles from public;
grant execute on function app.my_jobs, app.find_my_jobs, app.my_people, app.find_my_people, app.my_roles to app_read, app_write, app_worker;
grant execute on function app.act_on_job to app_read, app_write;
`;
