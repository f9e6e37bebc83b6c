// People, sessions and firms: who acts. Everything else asks app.actor(), app.my_firms() and app.my_jobs().
export default /* sql */ `
create schema app;
grant usage on schema app to app_read, app_write, app_worker;

-- json_build_object bypasses the checked number parser, so the range is held here
create domain app.cents as bigint check (value between -9007199254740991 and 9007199254740991);
create domain app.rate as integer check (value between 0 and 10000);

create table firm (
  id uuid primary key,
  name text not null check (length(name) between 2 and 120),
  time_zone text not null,
  created_at timestamptz(3) not null
);

create table person (
  id uuid primary key,
  email text unique check (email = lower(email)),
  name text,
  -- a firm's system person acts for the worker; it has no address and no session
  system_of uuid unique references firm (id),
  created_at timestamptz(3) not null,
  deactivated_at timestamptz(3),
  check ((email is null) = (system_of is not null) or deactivated_at is not null)
);

create table firm_member (
  firm_id uuid not null references firm (id),
  person_id uuid not null references person (id),
  role text not null check (role in ('principal', 'manager', 'site', 'books')),
  created_at timestamptz(3) not null,
  primary key (firm_id, person_id)
);
create index on firm_member (person_id);

create table session (
  id uuid primary key,
  person_id uuid not null references person (id),
  refresh_hash bytea not null unique,
  previous_hash bytea unique,
  rotated_at timestamptz(3) not null,
  present_at timestamptz(3) not null,
  user_agent text not null,
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  ended_at timestamptz(3)
);
create index on session (person_id);

-- raises when no unit of work has said who acts: a statement outside of one fails loudly instead of finding nothing
create function app.actor() returns uuid language plpgsql stable as $$
declare a text := nullif(current_setting('app.actor', true), '');
begin
  if a is null then raise exception 'no actor set for this statement' using errcode = 'TP001'; end if;
  return a::uuid;
end $$;

create function app.act_as(p_session uuid, p_person uuid, p_now timestamptz) returns void
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  perform 1 from session s join person p on p.id = s.person_id
    where s.id = p_session and s.person_id = p_person and s.ended_at is null and s.expires_at > p_now and p.deactivated_at is null;
  if not found then raise exception 'session over' using errcode = 'TP002'; end if;
  perform set_config('app.actor', p_person::text, true);
end $$;

create function app.act_as_system(p_firm uuid) returns uuid
  language plpgsql security definer set search_path = public, pg_temp as $$
declare who uuid;
begin
  select id into who from person where system_of = p_firm;
  if who is null then raise exception 'firm % has no system person', p_firm using errcode = 'TP003'; end if;
  perform set_config('app.actor', who::text, true);
  return who;
end $$;

-- What an actor may reach is asked by every policy of a statement, twice for each table. So the first answer is kept for the rest of the
-- transaction under the actor's name, in a setting that ends with it; whatever changes who belongs where forgets it. What policies call is
-- plain SQL over that setting, which is put in the place of the call.
create function app.keep(p_name text, p_ids uuid[]) returns uuid[] language plpgsql stable as $$
begin
  perform set_config('app.kept_' || p_name, app.actor() || p_ids::text, true);
  return p_ids;
end $$;

create function app.forget_kept() returns trigger language plpgsql as $$
begin
  perform set_config('app.kept_firms', '', true), set_config('app.kept_jobs', '', true), set_config('app.kept_people', '', true);
  return null;
end $$;
create trigger forget_kept after insert or update or delete on firm_member for each statement execute function app.forget_kept();

create function app.find_my_firms() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp as $$
declare me uuid := app.actor();
begin
  return app.keep('firms', (select coalesce(array_agg(firm_id), '{}') from (
    select firm_id from firm_member where person_id = me
    union select system_of from person where id = me and system_of is not null) f));
end $$;

create function app.my_firms() returns uuid[] language sql stable as $$
  select case when starts_with(current_setting('app.kept_firms', true), nullif(current_setting('app.actor', true), ''))
    then substr(current_setting('app.kept_firms', true), 37)::uuid[] else app.find_my_firms() end
$$;

alter table firm_member enable row level security;
alter table firm_member force row level security;
create policy own_firms on firm_member using (firm_id = any((select app.my_firms())::uuid[]));

alter table session enable row level security;
alter table session force row level security;
create policy own on session using (person_id = (select app.actor()));

grant select on firm, person, firm_member to app_read, app_write, app_worker;
grant select on session to app_read, app_write;
grant update (ended_at, present_at) on session to app_write;
grant update (name) on person to app_write;
revoke all on all functions in schema app from public;
grant execute on function app.actor, app.my_firms, app.find_my_firms, app.keep to app_read, app_write, app_worker;
grant execute on function app.act_as to app_read, app_write;
grant execute on function app.act_as_system to app_worker;
`;
