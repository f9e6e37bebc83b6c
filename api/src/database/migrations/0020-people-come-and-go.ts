// Invitations are sent again and taken back; people leave a job, members leave a firm. What they did keeps their name.
export default /* sql */ `
alter table invitation add column sent_at timestamptz(3);
update invitation set sent_at = created_at;
alter table invitation alter column sent_at set not null;
alter table firm_invitation add column sent_at timestamptz(3), add column revoked_at timestamptz(3);
update firm_invitation set sent_at = created_at;
alter table firm_invitation alter column sent_at set not null;
drop index one_open_firm_invitation;
create unique index one_open_firm_invitation on firm_invitation (firm_id, email) where accepted_at is null and revoked_at is null;
grant update (sent_at, expires_at, revoked_at) on firm_invitation to app_write;

create or replace function app.accept_firm_invitations(p_now timestamptz) returns integer
  language sql security definer set search_path = public, pg_temp as $$
  with mine as (
    update firm_invitation i set accepted_at = p_now, accepted_by = app.actor()
      where i.email = (select email from person where id = app.actor()) and i.accepted_at is null and i.revoked_at is null and i.expires_at > p_now
      returning i.firm_id, i.role, i.name),
  named as (
    update person set name = (select name from mine limit 1) where id = app.actor() and name is null and exists (select 1 from mine)),
  joined as (
    insert into firm_member (firm_id, person_id, role, created_at) select firm_id, app.actor(), role, p_now from mine
      on conflict (firm_id, person_id) do nothing)
  select count(*)::int from mine
$$;

-- what became of an invitation, for whoever lives at its address and for nobody else
create function app.invitation_for_me(p_id uuid, p_now timestamptz) returns table (firm_name text, job_id uuid, firm_id uuid, sender_name text, state text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select f.name, i.job_id, i.firm_id, coalesce(s.name, s.email),
    case when i.revoked_at is not null then 'revoked' when i.accepted_at is not null then 'accepted' when i.expires_at <= p_now then 'expired' else 'open' end
  from (select id, firm_id, job_id, email, invited_by, accepted_at, revoked_at, expires_at from invitation
    union all select id, firm_id, null, email, invited_by, accepted_at, revoked_at, expires_at from firm_invitation) i
  join firm f on f.id = i.firm_id join person s on s.id = i.invited_by
  where i.id = p_id and i.email = (select email from person where id = app.actor())
$$;

-- who was in the firm once: they reach nothing, and what they did keeps their name
create table former_member (
  firm_id uuid not null references firm (id),
  person_id uuid not null references person (id),
  role text not null,
  created_at timestamptz(3) not null,
  ended_at timestamptz(3) not null,
  ended_by uuid not null references person (id),
  primary key (firm_id, person_id, ended_at)
);
create index on former_member (person_id);
create policy firm_only on former_member using (firm_id = any((select app.my_firms())::uuid[]));
alter table former_member enable row level security;
alter table former_member force row level security;
grant select on former_member to app_read, app_write, app_worker;

-- The members of a firm change under its lock, by a principal alone, and never so that no principal is left.
create function app.lock_firm_for_principal(p_firm uuid) returns void language plpgsql security definer set search_path = public, pg_temp as $$
begin
  perform 1 from firm where id = p_firm for no key update;
  perform 1 from firm_member where firm_id = p_firm and person_id = app.actor() and role = 'principal';
  if not found then raise exception 'not a principal' using errcode = '42501'; end if;
end $$;

create function app.set_member_role(p_firm uuid, p_person uuid, p_role text) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
declare before text;
begin
  perform app.lock_firm_for_principal(p_firm);
  select role into before from firm_member where firm_id = p_firm and person_id = p_person for update;
  if before is null then return 'unknown'; end if;
  if before = 'principal' and p_role <> 'principal' and (select count(*) from firm_member where firm_id = p_firm and role = 'principal') = 1 then return 'last_principal'; end if;
  update firm_member set role = p_role where firm_id = p_firm and person_id = p_person;
  return 'done';
end $$;

create function app.end_member(p_firm uuid, p_person uuid, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
declare m firm_member%rowtype;
begin
  perform app.lock_firm_for_principal(p_firm);
  select * into m from firm_member where firm_id = p_firm and person_id = p_person for update;
  if not found then return 'unknown'; end if;
  if m.role = 'principal' and (select count(*) from firm_member where firm_id = p_firm and role = 'principal') = 1 then return 'last_principal'; end if;
  insert into former_member (firm_id, person_id, role, created_at, ended_at, ended_by) values (p_firm, p_person, m.role, m.created_at, p_now, app.actor());
  delete from firm_member where firm_id = p_firm and person_id = p_person;
  update guest_link set token_hash = null, revoked_at = p_now, revoked_by = app.actor()
    where firm_id = p_firm and sent_by = p_person and sender_side = 'firm' and revoked_at is null and done_at is null;
  return 'done';
end $$;

-- Somebody leaves a job, at once; the job is locked by the caller. Links that they sent from that side go with them.
create function app.end_job_member(p_job uuid, p_person uuid, p_role text, p_now timestamptz) returns boolean
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update job_member set ended_at = p_now where job_id = p_job and person_id = p_person and role = p_role and ended_at is null and firm_id = any(app.my_firms());
  if not found then return false; end if;
  update guest_link set token_hash = null, revoked_at = p_now, revoked_by = app.actor()
    where job_id = p_job and sent_by = p_person and sender_side = p_role and revoked_at is null and done_at is null;
  return true;
end $$;

-- once for every job of the firm: who was in it is part of what each job's record shows
create function app.record_in_all_jobs(p_firm uuid, p_text text) returns void language sql as $$
  select app.append_record(firm_id, id, 'shared', p_text) from (select firm_id, id from job where firm_id = p_firm order by id) j
$$;

create or replace function app.find_my_people() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp as $$
declare me uuid := app.actor(); firms uuid[] := app.my_firms(); jobs uuid[] := app.my_jobs();
begin
  return app.keep('people', (
    with reached as (select id, firm_id from job where firm_id = any(firms) or id = any(jobs))
    select coalesce(array_agg(distinct p), '{}') from (
      select me as p
      union select m.person_id from firm_member m where m.firm_id = any(firms) or m.firm_id in (select firm_id from reached)
      union select m.person_id from former_member m where m.firm_id = any(firms) or m.firm_id in (select firm_id from reached)
      union select m.person_id from job_member m where m.job_id in (select id from reached)
      union select g.person_id from guest_link g where g.job_id in (select id from reached)) x));
end $$;

-- Who gets a notice: whoever it was meant for while they are still there. What was meant for a former member goes to the firm's first
-- principal, since somebody has to hear of it; what was meant for somebody who left a job goes nowhere, but for the word that they left and what became of their own payments.
create function app.notice_receiver(p_notice uuid) returns table (email text, name text)
  language plpgsql stable security definer set search_path = public, pg_temp as $$
declare n notice%rowtype; who uuid;
begin
  select * into n from notice where id = p_notice;
  if n.kind in ('access-ended', 'payment-receipt', 'payment-failed', 'payment-returned') or exists (select 1 from firm_member m where m.firm_id = n.firm_id and m.person_id = n.person_id)
    or exists (select 1 from job_member m where m.job_id = n.job_id and m.person_id = n.person_id and m.ended_at is null) then who := n.person_id;
  elsif exists (select 1 from former_member m where m.firm_id = n.firm_id and m.person_id = n.person_id) then
    select m.person_id into who from firm_member m where m.firm_id = n.firm_id and m.role = 'principal' order by m.created_at, m.person_id limit 1;
  end if;
  return query select p.email, p.name from person p where p.id = who and p.email is not null and p.deactivated_at is null;
end $$;

revoke all on function app.invitation_for_me, app.lock_firm_for_principal, app.set_member_role, app.end_member, app.end_job_member, app.record_in_all_jobs, app.notice_receiver from public;
grant execute on function app.invitation_for_me to app_read, app_write;
grant execute on function app.set_member_role, app.end_member, app.end_job_member, app.record_in_all_jobs to app_write;
grant execute on function app.notice_receiver to app_worker;
`;
