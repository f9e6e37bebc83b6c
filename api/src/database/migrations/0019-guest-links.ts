// Guest links: somebody without an account acts on one thing, by a link and a mailed code. A guest is a person without an address and
// without memberships, so my_firms() and my_jobs() are empty for them: what they see and do goes through the definer functions below.
export default /* sql */ `
alter table person add column guest boolean not null default false;
alter table person drop constraint person_check;
alter table person add constraint person_has_address check ((email is null) = (system_of is not null or guest) or deactivated_at is not null);

create table guest_link (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  -- further kinds bring their own table of what they are for, and their own functions
  kind text not null check (kind in ('inspector')),
  name text not null check (length(name) between 2 and 120),
  email text not null check (email = lower(email)),
  -- the record holds only a hash of whom the link went to, salted by this, so that it can be erased
  salt bytea not null,
  note text not null check (length(note) <= 1000),
  person_id uuid not null unique references person (id),
  sent_by uuid not null references person (id),
  sender_side text not null check (sender_side in ('firm', 'lender', 'homeowner')),
  -- empty until the worker has made the token and mailed it
  token_hash bytea unique,
  days smallint not null check (days between 14 and 30),
  created_at timestamptz(3) not null,
  sent_at timestamptz(3) not null,
  mailed_at timestamptz(3),
  opened_at timestamptz(3),
  done_at timestamptz(3),
  expires_at timestamptz(3) not null,
  revoked_at timestamptz(3),
  revoked_by uuid references person (id),
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create index on guest_link (job_id, created_at);

-- what an inspector's link is for
create table guest_link_inspector (
  firm_id uuid not null,
  job_id uuid not null,
  link_id uuid primary key,
  on_behalf text not null check (on_behalf in ('lender', 'homeowner', 'town', 'firm')),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, link_id) references guest_link (firm_id, id)
);
create table guest_link_milestone (
  firm_id uuid not null,
  job_id uuid not null,
  link_id uuid not null,
  milestone_id uuid not null,
  answered_at timestamptz(3),
  primary key (link_id, milestone_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, link_id) references guest_link (firm_id, id),
  foreign key (firm_id, milestone_id) references milestone (firm_id, id) on delete cascade
);
create index on guest_link_milestone (milestone_id);

-- a visit by a link: it opens nothing until its code was entered
create table guest_session (
  id uuid primary key,
  link_id uuid not null references guest_link (id),
  token_hash bytea not null unique,
  created_at timestamptz(3) not null,
  confirmed_at timestamptz(3),
  expires_at timestamptz(3) not null,
  ended_at timestamptz(3)
);
create index on guest_session (link_id);
create table guest_code (
  id uuid primary key,
  session_id uuid not null references guest_session (id) on delete cascade,
  code_hash bytea,
  tries smallint not null default 0,
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  used_at timestamptz(3)
);
create index on guest_code (session_id, id desc);

-- who looked by a link, in their own words; apart from the inspection, which is never changed, so that it can be erased
create table guest_inspection (
  firm_id uuid not null,
  job_id uuid not null,
  inspection_id uuid primary key,
  link_id uuid not null,
  name text,
  company text,
  license text,
  told_at timestamptz(3),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, inspection_id) references inspection (firm_id, id),
  foreign key (firm_id, link_id) references guest_link (firm_id, id)
);
create index on guest_inspection (link_id);
-- false: seen by somebody whom the firm itself sent, which is no proof
alter table inspection add column independent boolean not null default true;

do $$
declare t text;
begin
  foreach t in array array['guest_link', 'guest_link_inspector', 'guest_link_milestone', 'guest_inspection'] loop
    execute format('create policy job_data on %I using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]))', t);
  end loop;
  -- sessions and codes have no policy: they are reached only through the functions below
  foreach t in array array['guest_link', 'guest_link_inspector', 'guest_link_milestone', 'guest_inspection', 'guest_session', 'guest_code'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
  end loop;
end $$;
grant select on guest_link, guest_link_inspector, guest_link_milestone, guest_inspection to app_read, app_write, app_worker;
grant insert on guest_link, guest_link_inspector, guest_link_milestone to app_write;
grant update (token_hash, days, sent_at, mailed_at, done_at, expires_at, revoked_at, revoked_by) on guest_link to app_write;
grant update (answered_at) on guest_link_milestone to app_write;
grant update (token_hash, mailed_at) on guest_link to app_worker;
grant update (told_at) on guest_inspection to app_worker;

-- the people I share a firm or a job with, in either direction; now also who was sent a link there
create or replace function app.find_my_people() returns uuid[] language plpgsql stable security definer set search_path = public, pg_temp as $$
declare me uuid := app.actor(); firms uuid[] := app.my_firms(); jobs uuid[] := app.my_jobs();
begin
  return app.keep('people', (
    with reached as (select id, firm_id from job where firm_id = any(firms) or id = any(jobs))
    select coalesce(array_agg(distinct p), '{}') from (
      select me as p
      union select m.person_id from firm_member m where m.firm_id = any(firms) or m.firm_id in (select firm_id from reached)
      union select m.person_id from job_member m where m.job_id in (select id from reached)
      union select g.person_id from guest_link g where g.job_id in (select id from reached)) x));
end $$;

-- somebody who can be named as having acted; no address, no session, no membership
create function app.new_guest(p_id uuid, p_name text, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  insert into person (id, name, guest, created_at) values (p_id, p_name, true, p_now)
$$;

-- whether an address is one of the firm's own people; a lender can't see who they are, and must not be sent to them
create function app.is_of_firm(p_job uuid, p_email text) returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from job j join firm_member m on m.firm_id = j.firm_id join person p on p.id = m.person_id
    where j.id = p_job and p.email = p_email and (j.firm_id = any(app.my_firms()) or j.id = any(app.my_jobs())))
$$;

-- enough to recognize one's own address by, too little for anybody else
create function app.masked(p_email text) returns text language sql immutable as $$
  select left(p_email, 1) || '•••@' || left(split_part(p_email, '@', 2), 1) || '•••' || coalesce(substring(split_part(p_email, '@', 2) from '\\.[^.]+$'), '')
$$;

create function app.link_is_good(l guest_link, p_now timestamptz) returns boolean language sql immutable as $$
  select l.revoked_at is null and l.expires_at > p_now
$$;

-- A token opens a visit, nothing more: the firm's name and the masked address. A link that was used up opens no further one.
create function app.open_guest_link(p_token bytea, p_session uuid, p_hash bytea, p_now timestamptz)
  returns table (firm_name text, sent_to text, expires_at timestamptz) language plpgsql security definer set search_path = public, pg_temp as $$
declare l guest_link%rowtype;
begin
  select * into l from guest_link g where g.token_hash = p_token;
  if not found or not app.link_is_good(l, p_now) or l.done_at is not null then return; end if;
  insert into guest_session (id, link_id, token_hash, created_at, expires_at)
    values (p_session, l.id, p_hash, p_now, least(p_now + interval '30 minutes', l.expires_at));
  return query select f.name, app.masked(l.email), l.expires_at from firm f where f.id = l.firm_id;
end $$;

-- Who acts is the guest; the link is named only once the code was entered, and whatever shows or does something asks for it.
create function app.act_as_guest(p_hash bytea, p_now timestamptz)
  returns table (session_id uuid, link_id uuid, firm_id uuid, job_id uuid, person_id uuid, firm_name text, sent_to text, expires_at timestamptz, confirmed_at timestamptz)
  language plpgsql security definer set search_path = public, pg_temp as $$
#variable_conflict use_column
declare s guest_session%rowtype; l guest_link%rowtype;
begin
  select * into s from guest_session where token_hash = p_hash and ended_at is null and expires_at > p_now;
  if not found then raise exception 'visit over' using errcode = 'TP002'; end if;
  select * into l from guest_link where id = s.link_id;
  if not app.link_is_good(l, p_now) then raise exception 'link over' using errcode = 'TP002'; end if;
  perform set_config('app.actor', l.person_id::text, true);
  perform set_config('app.guest_link', case when s.confirmed_at is null then '' else l.id::text end, true);
  return query select s.id, l.id, l.firm_id, l.job_id, l.person_id, f.name, app.masked(l.email), l.expires_at, s.confirmed_at from firm f where f.id = l.firm_id;
end $$;

create function app.guest_link() returns uuid language plpgsql stable as $$
declare l text := nullif(current_setting('app.guest_link', true), '');
begin
  if l is null then raise exception 'no confirmed guest' using errcode = 'TP002'; end if;
  return l::uuid;
end $$;

create function app.ask_for_guest_code(p_session uuid, p_id uuid, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  insert into guest_code (id, session_id, created_at, expires_at)
    select p_id, s.id, p_now, p_now + interval '10 minutes' from guest_session s join guest_link l on l.id = s.link_id
    where s.id = p_session and l.person_id = app.actor()
$$;

-- for the worker: where a code goes, and which visit asked for it
create function app.guest_code_address(p_id uuid, p_now timestamptz) returns table (email text, name text, session_id uuid, firm_name text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select l.email, l.name, s.id, f.name from guest_code c join guest_session s on s.id = c.session_id join guest_link l on l.id = s.link_id join firm f on f.id = l.firm_id
    where c.id = p_id and c.used_at is null and c.expires_at > p_now and s.ended_at is null and app.link_is_good(l, p_now)
$$;
create function app.set_guest_code(p_id uuid, p_hash bytea, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  update guest_code set code_hash = p_hash, tries = 0 where id = p_id and used_at is null and expires_at > p_now
$$;

-- A wrong code is a result, so that tries are counted. Only the newest code of this visit is good; a right one gives the visit a new token.
create function app.confirm_guest(p_session uuid, p_code bytea, p_hash bytea, p_now timestamptz, out outcome text, out first boolean)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare c guest_code%rowtype; l guest_link%rowtype;
begin
  first := false;
  select g.* into l from guest_link g join guest_session s on s.link_id = g.id where s.id = p_session and g.person_id = app.actor() for no key update of g;
  select * into c from guest_code where session_id = p_session order by id desc limit 1 for update;
  if l.id is null or c.id is null or c.used_at is not null or c.expires_at <= p_now or c.tries >= 5 or c.code_hash is null then outcome := 'expired'; return; end if;
  if c.code_hash <> p_code then
    update guest_code set tries = tries + 1 where id = c.id;
    outcome := 'wrong';
    return;
  end if;
  outcome := 'right';
  first := l.opened_at is null;
  update guest_code set used_at = p_now where id = c.id;
  update guest_session set token_hash = p_hash, confirmed_at = p_now, expires_at = least(p_now + interval '60 minutes', l.expires_at) where id = p_session;
  update guest_link set opened_at = coalesce(opened_at, p_now) where id = l.id;
  perform set_config('app.guest_link', l.id::text, true);
end $$;

create function app.end_guest_session(p_session uuid, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  update guest_session s set ended_at = p_now from guest_link l where s.id = p_session and l.id = s.link_id and l.person_id = app.actor()
$$;

-- the guest's own entry in the shared chain of the link's job, and in no other
create function app.append_guest_record(p_text text) returns void language plpgsql security definer set search_path = public, pg_temp as $$
declare l guest_link%rowtype;
begin
  select * into l from guest_link where id = app.guest_link();
  if (p_text::jsonb->>'by')::uuid is distinct from l.person_id then raise exception 'a guest writes for nobody else' using errcode = '42501'; end if;
  perform app.append_record(l.firm_id, l.job_id, 'shared', p_text);
end $$;

-- What an inspector sees: the milestones of the link, what belongs to them, their photos without coordinates. No sums.
create function app.guest_inspector_visit() returns jsonb language sql stable security definer set search_path = public, pg_temp as $$
  select jsonb_build_object(
    'linkId', l.id, 'name', l.name, 'note', l.note, 'onBehalf', b.on_behalf, 'senderSide', l.sender_side, 'senderName', coalesce(s.name, s.email),
    'firmName', f.name, 'jobName', j.name, 'place', j.street || ', ' || j.city || ', ' || j.state || ' ' || j.zip, 'timeZone', j.time_zone,
    'milestones', (select coalesce(jsonb_agg(jsonb_build_object('id', m.id, 'name', m.name, 'state', m.state, 'percent', m.percent, 'version', m.version,
        'claimedAt', to_char(m.claimed_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
        'claimedBy', (select coalesce(c.name, c.email) from person c where c.id = m.claimed_by),
        'answeredAt', to_char(g.answered_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
        'parts', (select coalesce(jsonb_agg(v.description order by v.position), '[]') from schedule_line v where v.milestone_id = m.id),
        'photos', (select coalesce(jsonb_agg(jsonb_build_object('id', p.id, 'milestoneId', p.milestone_id, 'fileId', p.file_id, 'state', p.state, 'trouble', p.trouble, 'note', p.note,
            'takenAt', to_char(p.taken_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'), 'place', null, 'width', p.width, 'height', p.height,
            'bytes', i.bytes, 'sha256', i.sha256, 'findings', p.findings, 'addedBy', jsonb_build_object('id', q.id, 'name', coalesce(q.name, q.email)),
            'addedAt', to_char(p.created_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')) order by p.created_at desc, p.id desc), '[]')
          from (select * from photo where milestone_id = m.id order by created_at desc, id desc limit 60) p join file i on i.id = p.file_id join person q on q.id = p.created_by))
      order by m.position), '[]') from guest_link_milestone g join milestone m on m.id = g.milestone_id where g.link_id = l.id))
  from guest_link l join guest_link_inspector b on b.link_id = l.id join job j on j.id = l.job_id join firm f on f.id = l.firm_id join person s on s.id = l.sent_by
  where l.id = app.guest_link()
$$;

create function app.guest_photo_sizes(p_photo uuid) returns jsonb language sql stable security definer set search_path = public, pg_temp as $$
  select p.sizes from photo p join guest_link_milestone g on g.milestone_id = p.milestone_id where p.id = p_photo and g.link_id = app.guest_link()
$$;

create function app.guest_has_milestone(p_milestone uuid) returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from guest_link_milestone where link_id = app.guest_link() and milestone_id = p_milestone)
$$;

create function app.add_guest_photo(p_id uuid, p_milestone uuid, p_name text, p_type text, p_bytes bigint, p_sha256 text, p_key text, p_note text, p_now timestamptz) returns boolean
  language plpgsql security definer set search_path = public, pg_temp as $$
declare l guest_link%rowtype;
begin
  select * into l from guest_link where id = app.guest_link();
  if not app.guest_has_milestone(p_milestone) then return false; end if;
  insert into file (firm_id, job_id, id, name, purpose, media_type, bytes, sha256, storage_key, audience, created_by, created_at)
    values (l.firm_id, l.job_id, p_id, p_name, 'photo', p_type, p_bytes, p_sha256, p_key, 'job', l.person_id, p_now);
  insert into photo (firm_id, job_id, id, file_id, milestone_id, note, created_by, created_at) values (l.firm_id, l.job_id, p_id, p_id, p_milestone, p_note, l.person_id, p_now);
  return true;
end $$;

-- Locks link, job and milestone in the order of every act, and says what the act needs to know.
create function app.lock_guest_milestone(p_milestone uuid)
  returns table (job_name text, time_zone text, job_created_by uuid, name text, state text, percent integer, claimed_by uuid, version integer, answered_at timestamptz, on_behalf text, sender_side text, salt bytea, email text)
  language plpgsql security definer set search_path = public, pg_temp as $$
#variable_conflict use_column
begin
  perform 1 from job where id = (select job_id from guest_link where id = app.guest_link()) for no key update;
  return query
    select j.name, j.time_zone, j.created_by, m.name, m.state, m.percent::integer, m.claimed_by, m.version, g.answered_at, b.on_behalf, l.sender_side, l.salt, l.email
    from guest_link l join guest_link_inspector b on b.link_id = l.id join guest_link_milestone g on g.link_id = l.id join milestone m on m.id = g.milestone_id join job j on j.id = l.job_id
    where l.id = app.guest_link() and m.id = p_milestone for no key update of l, g, m;
end $$;

-- What a guest saw, under the locks taken before. The milestone moves only where the caller says to which state.
create function app.record_guest_inspection(p_id uuid, p_milestone uuid, p_result text, p_percent integer, p_note text, p_seen_on date, p_independent boolean,
  p_name text, p_company text, p_license text, p_state text, p_now timestamptz) returns void
  language plpgsql security definer set search_path = public, pg_temp as $$
declare l guest_link%rowtype;
begin
  select * into l from guest_link where id = app.guest_link();
  if not app.guest_has_milestone(p_milestone) then raise exception 'not of this link' using errcode = '42501'; end if;
  insert into inspection (firm_id, job_id, id, milestone_id, result, percent, note, seen_on, by_person, role, at, independent)
    values (l.firm_id, l.job_id, p_id, p_milestone, p_result, p_percent, p_note, p_seen_on, l.person_id, 'inspector', p_now, p_independent);
  insert into guest_inspection (firm_id, job_id, inspection_id, link_id, name, company, license) values (l.firm_id, l.job_id, p_id, l.id, p_name, p_company, p_license);
  update person set name = p_name where id = l.person_id;
  if p_state is not null then
    update milestone set state = p_state, percent = p_percent, version = version + 1,
      proven_at = case when p_state = 'proven' then p_now end, proven_by = case when p_state = 'proven' then l.person_id end,
      claimed_at = case when p_state = 'proven' then claimed_at end, claimed_by = case when p_state = 'proven' then claimed_by end,
      actual_on = case when p_state = 'proven' then actual_on end
      where id = p_milestone;
  end if;
  update guest_link_milestone set answered_at = p_now where link_id = l.id and milestone_id = p_milestone;
  -- once everything is answered the link is used up; sending it again opens it again
  update guest_link set done_at = p_now where id = l.id and not exists (select 1 from guest_link_milestone where link_id = l.id and answered_at is null);
end $$;

create function app.sweep_guests(p_now timestamptz) returns void language sql security definer set search_path = public, pg_temp as $$
  delete from guest_session where expires_at < p_now - interval '30 days';
$$;

revoke all on function app.new_guest, app.is_of_firm, app.masked, app.link_is_good, app.open_guest_link, app.act_as_guest, app.guest_link, app.ask_for_guest_code, app.guest_code_address, app.set_guest_code,
  app.confirm_guest, app.end_guest_session, app.append_guest_record, app.guest_inspector_visit, app.guest_photo_sizes, app.guest_has_milestone, app.add_guest_photo, app.lock_guest_milestone,
  app.record_guest_inspection, app.sweep_guests from public;
grant execute on function app.act_as_guest, app.guest_link, app.guest_inspector_visit, app.guest_photo_sizes, app.guest_has_milestone, app.masked to app_read, app_write;
grant execute on function app.new_guest, app.is_of_firm, app.open_guest_link, app.ask_for_guest_code, app.confirm_guest, app.end_guest_session, app.append_guest_record, app.add_guest_photo,
  app.lock_guest_milestone, app.record_guest_inspection to app_write;
grant execute on function app.guest_code_address, app.set_guest_code, app.sweep_guests to app_worker;
`;
