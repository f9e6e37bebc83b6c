// What stands on the firm's papers, whether its site people see prices, and the erasure of personal fields of people who left.
export default /* sql */ `
alter table firm
  add column street text not null default '',
  add column city text not null default '',
  add column state text not null default '' check (state ~ '^([A-Z]{2})?$'),
  add column zip text not null default '',
  add column phone text not null default '',
  add column license text not null default '',
  add column site_sees_prices boolean not null default false,
  add column version integer not null default 1;

-- The sign of the firm on its papers: small, and made anew from what was sent, so that nothing but a picture is kept.
create table firm_logo (
  firm_id uuid primary key references firm (id),
  state text not null check (state in ('stored', 'ready', 'unreadable')),
  -- what was sent, until the worker has made the picture of it
  sent bytea,
  content bytea,
  trouble text,
  version integer not null,
  updated_at timestamptz(3) not null,
  check ((state = 'stored') = (sent is not null)),
  check (state <> 'ready' or content is not null)
);
create policy firm_only on firm_logo using (firm_id = any((select app.my_firms())::uuid[]));
alter table firm_logo enable row level security;
alter table firm_logo force row level security;
grant select on firm_logo to app_read, app_write, app_worker;
grant insert, update, delete on firm_logo to app_write;
grant update on firm_logo to app_worker;

-- by a principal alone; the worker's own person of the firm is called as the firm is
create function app.set_firm_settings(p_firm uuid, p_version integer, p_name text, p_street text, p_city text, p_state text, p_zip text, p_phone text, p_license text, p_prices boolean)
  returns integer language plpgsql security definer set search_path = public, pg_temp as $$
declare now_version integer;
begin
  perform app.lock_firm_for_principal(p_firm);
  update firm set name = p_name, street = p_street, city = p_city, state = p_state, zip = p_zip, phone = p_phone, license = p_license, site_sees_prices = p_prices, version = version + 1
    where id = p_firm and version = p_version returning version into now_version;
  if now_version is not null then update person set name = p_name where system_of = p_firm; end if;
  return now_version;
end $$;

-- Who left the firm or one of its jobs, or came by one of its links, and reaches nothing any more, here or elsewhere.
create function app.people_who_left(p_firm uuid) returns table (person_id uuid, name text, role text, place text, ended_at timestamptz, elsewhere boolean, erased boolean)
  language sql stable security definer set search_path = public, pg_temp as $$
  select x.person_id, coalesce(p.name, p.email), x.role, x.place, x.ended_at,
    exists (select 1 from firm_member m where m.person_id = x.person_id) or exists (select 1 from job_member m where m.person_id = x.person_id and m.ended_at is null)
      or exists (select 1 from guest_link l where l.person_id = x.person_id and l.revoked_at is null and l.done_at is null and l.expires_at > now()),
    p.deactivated_at is not null
  from (
    select m.person_id, m.role, f.name as place, m.ended_at from former_member m join firm f on f.id = m.firm_id where m.firm_id = p_firm
    union all select m.person_id, m.role, j.name, m.ended_at from job_member m join job j on j.id = m.job_id where j.firm_id = p_firm and m.ended_at is not null
    union all select l.person_id, 'inspector', j.name, coalesce(l.revoked_at, l.done_at, l.expires_at) from guest_link l join job j on j.id = l.job_id
      where l.firm_id = p_firm and (l.revoked_at is not null or l.done_at is not null or l.expires_at <= now())) x
  join person p on p.id = x.person_id
  where exists (select 1 from firm_member m where m.firm_id = p_firm and m.person_id = app.actor() and m.role = 'principal')
$$;

-- Takes the personal fields of somebody who left: the record names them by id and salted hash only, so it goes on verifying. What they
-- signed stays as it was signed: a signature and its paper are part of a contract.
create function app.erase_person(p_firm uuid, p_person uuid, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
declare address text;
begin
  perform app.lock_firm_for_principal(p_firm);
  perform 1 from person where id = p_person for update;
  if not exists (select 1 from app.people_who_left(p_firm) l where l.person_id = p_person) then return 'unknown'; end if;
  if exists (select 1 from app.people_who_left(p_firm) l where l.person_id = p_person and l.elsewhere) then return 'elsewhere'; end if;
  if exists (select 1 from person where id = p_person and deactivated_at is not null) then return 'done'; end if;
  select email into address from person where id = p_person;
  update person set name = 'Name erased', email = null, deactivated_at = p_now where id = p_person;
  update session set ended_at = coalesce(ended_at, p_now), user_agent = '' where person_id = p_person;
  delete from sign_in_code where email = address;
  delete from rate_limit where key like '%:' || address;
  update invitation set email = 'erased', name = 'Name erased' where accepted_by = p_person or (email = address and (accepted_at is not null or revoked_at is not null));
  update invitation set email = 'erased-' || id, name = 'Name erased', revoked_at = p_now where email = address;
  update firm_invitation set email = 'erased', name = 'Name erased' where accepted_by = p_person or (email = address and (accepted_at is not null or revoked_at is not null));
  update firm_invitation set email = 'erased-' || id, name = 'Name erased', revoked_at = p_now where email = address;
  update notice set data = '{}', to_name = null, to_email = case when to_email is null then null else '' end where sent_at is not null and (person_id = p_person or to_email = address);
  -- without its salt, the hash in the record is a hash of nobody
  update guest_link set name = 'Name erased', email = 'erased', salt = '', token_hash = null, revoked_at = coalesce(revoked_at, p_now) where person_id = p_person;
  update guest_inspection g set name = null, company = null, license = null from guest_link l where l.id = g.link_id and l.person_id = p_person;
  update command set answer = null where actor_id = p_person;
  return 'done';
end $$;

-- what concerns one person stands in the record of the jobs that they were on, as the firm's or from outside
create function app.record_where_they_were(p_firm uuid, p_person uuid, p_text text) returns void language sql as $$
  select app.append_record(firm_id, id, 'shared', p_text) from (
    select j.firm_id, j.id from job j where j.firm_id = p_firm and (exists (select 1 from former_member m where m.firm_id = j.firm_id and m.person_id = p_person)
      or exists (select 1 from job_member m where m.job_id = j.id and m.person_id = p_person)
      or exists (select 1 from guest_link l where l.job_id = j.id and l.person_id = p_person)) order by j.id) x
$$;

revoke all on function app.set_firm_settings, app.people_who_left, app.erase_person, app.record_where_they_were from public;
grant execute on function app.people_who_left to app_read, app_write;
grant execute on function app.set_firm_settings, app.erase_person, app.record_where_they_were to app_write;
`;
