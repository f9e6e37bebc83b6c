// What must run before a membership exists: codes, sessions, starting a firm, accepting invitations. Each is one definer function.
export default /* sql */ `
create table sign_in_code (
  id uuid primary key,
  email text not null check (email = lower(email)),
  -- empty until the worker has made the code and mailed it
  code_hash bytea,
  tries smallint not null default 0,
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  used_at timestamptz(3)
);
create index on sign_in_code (email, id desc);
-- no policy: reached only through the functions below
alter table sign_in_code enable row level security;
alter table sign_in_code force row level security;

create function app.ask_for_code(p_id uuid, p_email text, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  insert into sign_in_code (id, email, created_at, expires_at) values (p_id, p_email, p_now, p_now + interval '10 minutes')
$$;

-- the worker makes a code; the same job run again makes another one in its place
create function app.set_code(p_id uuid, p_hash bytea, p_now timestamptz) returns text
  language sql security definer set search_path = public, pg_temp as $$
  update sign_in_code set code_hash = p_hash, tries = 0 where id = p_id and used_at is null and expires_at > p_now returning email
$$;

create function app.code_address(p_id uuid, p_now timestamptz) returns text
  language sql stable security definer set search_path = public, pg_temp as $$
  select email from sign_in_code where id = p_id and used_at is null and expires_at > p_now
$$;

-- A wrong code is a result, never an exception: the count of tries must be committed. Only the newest code of an address is good.
create function app.try_code(p_email text, p_hash bytea, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
declare c sign_in_code%rowtype;
begin
  select * into c from sign_in_code where email = p_email order by id desc limit 1 for update;
  if not found or c.used_at is not null or c.expires_at <= p_now or c.tries >= 5 or c.code_hash is null then return 'expired'; end if;
  if c.code_hash <> p_hash then
    update sign_in_code set tries = tries + 1 where id = c.id;
    return 'wrong';
  end if;
  update sign_in_code set used_at = p_now where id = c.id;
  return 'right';
end $$;

create function app.sign_in(p_email text, p_hash bytea, p_person uuid, p_session uuid, p_refresh bytea, p_agent text, p_now timestamptz,
  out outcome text, out person_id uuid) language plpgsql security definer set search_path = public, pg_temp as $$
begin
  outcome := app.try_code(p_email, p_hash, p_now);
  if outcome <> 'right' then return; end if;
  insert into person (id, email, created_at) values (p_person, p_email, p_now) on conflict (email) do nothing;
  select id into person_id from person where email = p_email and deactivated_at is null;
  if person_id is null then outcome := 'expired'; return; end if;
  insert into session (id, person_id, refresh_hash, rotated_at, present_at, user_agent, created_at, expires_at)
    values (p_session, person_id, p_refresh, p_now, p_now, left(p_agent, 300), p_now, p_now + interval '30 days');
end $$;

-- proof of presence: a fresh code at the person's own address
create function app.prove_presence(p_session uuid, p_hash bytea, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
declare address text; outcome text;
begin
  select email into address from person where id = app.actor();
  outcome := app.try_code(address, p_hash, p_now);
  if outcome = 'right' then update session set present_at = p_now where id = p_session and person_id = app.actor(); end if;
  return outcome;
end $$;

-- The token before the current one stays good for a minute, for two tabs that refresh at once; after that its use ends the session.
create function app.refresh_session(p_hash bytea, p_new bytea, p_now timestamptz, out outcome text, out session_id uuid, out person_id uuid)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare s session%rowtype;
begin
  select * into s from session where refresh_hash = p_hash or previous_hash = p_hash for update;
  if not found or s.ended_at is not null or s.expires_at <= p_now then outcome := 'over'; return; end if;
  if s.refresh_hash = p_hash then
    update session set previous_hash = refresh_hash, refresh_hash = p_new, rotated_at = p_now where id = s.id;
    outcome := 'rotated';
  elsif s.rotated_at > p_now - interval '60 seconds' then
    outcome := 'kept';
  else
    update session set ended_at = p_now where id = s.id;
    outcome := 'reused';
    return;
  end if;
  session_id := s.id;
  person_id := s.person_id;
end $$;

create function app.start_firm(p_firm uuid, p_name text, p_zone text, p_system uuid, p_terms jsonb, p_now timestamptz) returns boolean
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  insert into firm (id, name, time_zone, created_at) values (p_firm, p_name, p_zone, p_now) on conflict (id) do nothing;
  if not found then return false; end if;
  insert into person (id, name, system_of, created_at) values (p_system, p_name, p_firm, p_now);
  insert into firm_member (firm_id, person_id, role, created_at) values (p_firm, app.actor(), 'principal', p_now);
  insert into firm_pricing (firm_id, terms, updated_at) values (p_firm, p_terms, p_now);
  return true;
end $$;

-- invitations to the address that this person has proven
create function app.accept_invitations(p_now timestamptz) returns table (id uuid, firm_id uuid, job_id uuid, role text, invited_by uuid)
  language plpgsql security definer set search_path = public, pg_temp as $$
#variable_conflict use_column
begin
  return query
    with mine as (
      update invitation i set accepted_at = p_now, accepted_by = app.actor()
        where i.email = (select email from person where person.id = app.actor())
          and i.accepted_at is null and i.revoked_at is null and i.expires_at > p_now
        returning i.id, i.firm_id, i.job_id, i.role, i.name, i.invited_by),
    named as (
      update person set name = (select m.name from mine m limit 1)
        where person.id = app.actor() and person.name is null and exists (select 1 from mine)),
    joined as (
      insert into job_member (firm_id, job_id, person_id, role, created_at)
        select m.firm_id, m.job_id, app.actor(), m.role, p_now from mine m
        on conflict (job_id, person_id, role) do update set ended_at = null)
    select m.id, m.firm_id, m.job_id, m.role, m.invited_by from mine m;
end $$;

create function app.my_invitations(p_now timestamptz) returns table (id uuid, role text, job_name text, firm_name text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select i.id, i.role, j.name, f.name from invitation i join job j on j.id = i.job_id join firm f on f.id = i.firm_id
    where i.email = (select email from person where person.id = app.actor())
      and i.accepted_at is null and i.revoked_at is null and i.expires_at > p_now
$$;

create function app.is_empty() returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select not exists (select 1 from firm)
$$;

revoke all on function app.is_empty, app.ask_for_code, app.set_code, app.code_address, app.try_code, app.sign_in, app.prove_presence, app.refresh_session, app.start_firm,
  app.accept_invitations, app.my_invitations from public;
grant execute on function app.ask_for_code, app.sign_in, app.prove_presence, app.refresh_session, app.start_firm, app.accept_invitations to app_write;
grant execute on function app.my_invitations to app_read, app_write;
grant execute on function app.is_empty, app.set_code, app.code_address to app_worker;
`;
