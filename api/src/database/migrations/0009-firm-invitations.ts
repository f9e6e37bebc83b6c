// Managers, site people and bookkeepers come into a firm by invitation, as everybody comes onto a job.
export default /* sql */ `
create table firm_invitation (
  id uuid primary key,
  firm_id uuid not null references firm (id),
  email text not null check (email = lower(email)),
  name text not null,
  role text not null check (role in ('principal', 'manager', 'site', 'books')),
  invited_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  accepted_at timestamptz(3),
  accepted_by uuid references person (id)
);
create unique index one_open_firm_invitation on firm_invitation (firm_id, email) where accepted_at is null;
create index on firm_invitation (email) where accepted_at is null;
alter table firm_invitation enable row level security;
alter table firm_invitation force row level security;
create policy firm_only on firm_invitation using (firm_id = any((select app.my_firms())::uuid[]));
grant select on firm_invitation to app_read, app_write, app_worker;
grant insert on firm_invitation to app_write;

create function app.accept_firm_invitations(p_now timestamptz) returns integer
  language sql security definer set search_path = public, pg_temp as $$
  with mine as (
    update firm_invitation i set accepted_at = p_now, accepted_by = app.actor()
      where i.email = (select email from person where id = app.actor()) and i.accepted_at is null and i.expires_at > p_now
      returning i.firm_id, i.role, i.name),
  named as (
    update person set name = (select name from mine limit 1) where id = app.actor() and name is null and exists (select 1 from mine)),
  joined as (
    insert into firm_member (firm_id, person_id, role, created_at) select firm_id, app.actor(), role, p_now from mine
      on conflict (firm_id, person_id) do nothing)
  select count(*)::int from mine
$$;
revoke all on function app.accept_firm_invitations from public;
grant execute on function app.accept_firm_invitations to app_write;
`;
