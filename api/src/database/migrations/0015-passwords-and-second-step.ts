// Passwords beside mailed codes, a second step by an authenticator, what is mailed about an account, and families of refresh tokens.
export default /* sql */ `
create table password (
  person_id uuid primary key references person (id),
  hash text not null check (hash like '$argon2id$%'),
  set_at timestamptz(3) not null
);
create policy own on password using (person_id = (select app.actor()));
alter table password enable row level security;
alter table password force row level security;
-- the hash is read by app.password_of alone
grant select (person_id, set_at) on password to app_read, app_write;
grant insert, update (hash, set_at), delete on password to app_write;

create table totp (
  person_id uuid primary key references person (id),
  -- which of the environment's keys the secret is encrypted with
  key_id text not null,
  secret bytea not null,
  recovery_salt bytea,
  created_at timestamptz(3) not null,
  -- empty until the first code was right
  confirmed_at timestamptz(3),
  last_step integer not null default -1,
  wrong_tries smallint not null default 0,
  wrong_since timestamptz(3)
);
create policy own on totp using (person_id = (select app.actor()));
alter table totp enable row level security;
alter table totp force row level security;
grant select (person_id, confirmed_at) on totp to app_read;
grant select, insert, update, delete on totp to app_write;

create table recovery_code (
  person_id uuid not null references totp (person_id) on delete cascade,
  code_hash bytea not null,
  used_at timestamptz(3),
  primary key (person_id, code_hash)
);
create policy own on recovery_code using (person_id = (select app.actor()));
alter table recovery_code enable row level security;
alter table recovery_code force row level security;
grant select (person_id, used_at) on recovery_code to app_read;
grant select, insert, update (used_at), delete on recovery_code to app_write;

-- a sign-in whose first step was right and whose second one is waited for
create table sign_in_step (
  id uuid primary key,
  person_id uuid not null references person (id),
  token_hash bytea not null unique,
  tries smallint not null default 0,
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  done_at timestamptz(3)
);
create index on sign_in_step (person_id);
-- no policy: reached only through the functions below
alter table sign_in_step enable row level security;
alter table sign_in_step force row level security;

-- the outbox of what concerns a person's own account, whatever firm they belong to; the address is the one they had when it happened
create table account_notice (
  id uuid primary key,
  kind text not null,
  to_email text not null,
  data jsonb not null,
  created_at timestamptz(3) not null,
  sent_at timestamptz(3)
);
alter table account_notice enable row level security;
alter table account_notice force row level security;

create function app.post_account_notice(p_id uuid, p_person uuid, p_kind text, p_data jsonb, p_now timestamptz) returns boolean
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  insert into account_notice (id, kind, to_email, data, created_at)
    select p_id, p_kind, email, p_data, p_now from person where id = p_person and email is not null and deactivated_at is null;
  return found;
end $$;

create function app.account_notice(p_id uuid) returns table (kind text, email text, data jsonb)
  language sql stable security definer set search_path = public, pg_temp as $$
  select kind, to_email, data from account_notice where id = p_id and sent_at is null and to_email <> ''
$$;

create function app.account_notice_sent(p_id uuid, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  update account_notice set sent_at = p_now where id = p_id and sent_at is null
$$;

create function app.password_of(p_email text) returns table (person_id uuid, hash text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select p.id, w.hash from person p join password w on w.person_id = p.id where p.email = p_email and p.deactivated_at is null
$$;

-- After the first step: a session, or for whoever has a second step the wait for it. The token is the session's, or the wait's.
create function app.enter(p_person uuid, p_id uuid, p_token bytea, p_agent text, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if exists (select 1 from totp where person_id = p_person and confirmed_at is not null) then
    insert into sign_in_step (id, person_id, token_hash, created_at, expires_at) values (p_id, p_person, p_token, p_now, p_now + interval '10 minutes');
    return 'second';
  end if;
  insert into session (id, person_id, refresh_hash, rotated_at, present_at, user_agent, created_at, expires_at)
    values (p_id, p_person, p_token, p_now, p_now, left(p_agent, 300), p_now, p_now + interval '30 days');
  return 'right';
end $$;

create or replace function app.sign_in(p_email text, p_hash bytea, p_person uuid, p_session uuid, p_refresh bytea, p_agent text, p_now timestamptz,
  out outcome text, out person_id uuid) language plpgsql security definer set search_path = public, pg_temp as $$
begin
  outcome := app.try_code(p_email, p_hash, p_now);
  if outcome <> 'right' then return; end if;
  insert into person (id, email, created_at) values (p_person, p_email, p_now) on conflict (email) do nothing;
  select id into person_id from person where email = p_email and deactivated_at is null;
  if person_id is null then outcome := 'expired'; return; end if;
  outcome := app.enter(person_id, p_session, p_refresh, p_agent, p_now);
end $$;

-- the hash is the one that was checked: a password that was changed in between lets nobody in
create function app.sign_in_by_password(p_person uuid, p_hash text, p_session uuid, p_refresh bytea, p_agent text, p_now timestamptz) returns text
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  perform 1 from password w join person p on p.id = w.person_id where w.person_id = p_person and w.hash = p_hash and p.deactivated_at is null for share of w;
  if not found then return 'wrong'; end if;
  return app.enter(p_person, p_session, p_refresh, p_agent, p_now);
end $$;

-- Counts a try and lets the person act in this transaction, so that their second step can be checked. Five tries, ten minutes.
create function app.resume_sign_in(p_token bytea, p_now timestamptz, out person_id uuid, out tries integer)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare s sign_in_step%rowtype;
begin
  select * into s from sign_in_step where token_hash = p_token for update;
  if not found or s.done_at is not null or s.expires_at <= p_now or s.tries >= 5 then return; end if;
  perform 1 from person where id = s.person_id and deactivated_at is null;
  if not found then return; end if;
  update sign_in_step set tries = s.tries + 1 where id = s.id;
  perform set_config('app.actor', s.person_id::text, true);
  person_id := s.person_id;
  tries := s.tries + 1;
end $$;

create function app.finish_sign_in(p_token bytea, p_session uuid, p_refresh bytea, p_agent text, p_now timestamptz) returns boolean
  language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update sign_in_step set done_at = p_now where token_hash = p_token and person_id = app.actor() and done_at is null;
  if not found then return false; end if;
  insert into session (id, person_id, refresh_hash, rotated_at, present_at, user_agent, created_at, expires_at)
    values (p_session, app.actor(), p_refresh, p_now, p_now, left(p_agent, 300), p_now, p_now + interval '30 days');
  return true;
end $$;

-- after a factor changed, whoever else is in goes out, and so does whoever is half-way in
create function app.end_other_sessions(p_session uuid, p_now timestamptz) returns integer
  language plpgsql security definer set search_path = public, pg_temp as $$
declare ended integer;
begin
  update sign_in_step set done_at = p_now where person_id = app.actor() and done_at is null;
  update session set ended_at = p_now where person_id = app.actor() and id <> p_session and ended_at is null;
  get diagnostics ended = row_count;
  return ended;
end $$;

-- a session that nobody used for so long is over, whatever its end
create function app.session_idle() returns interval language sql immutable as $$ select interval '7 days' $$;

-- The caller has seen by its seal that this token was issued for this session. The one before the current stays good for a minute, for
-- two tabs that renew at once. Any other is one that was used up: somebody kept a copy, so the session ends.
drop function app.refresh_session(bytea, bytea, timestamptz);
create function app.refresh_session(p_session uuid, p_hash bytea, p_new bytea, p_now timestamptz, out outcome text, out person_id uuid)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare s session%rowtype;
begin
  select * into s from session where id = p_session for update;
  if not found or s.ended_at is not null or s.expires_at <= p_now or s.rotated_at + app.session_idle() <= p_now then outcome := 'over'; return; end if;
  person_id := s.person_id;
  if s.refresh_hash = p_hash then
    update session set previous_hash = refresh_hash, refresh_hash = p_new, rotated_at = p_now where id = s.id;
    outcome := 'rotated';
  elsif s.previous_hash = p_hash and s.rotated_at > p_now - interval '60 seconds' then
    outcome := 'kept';
  else
    update session set ended_at = p_now where id = s.id;
    outcome := 'reused';
  end if;
end $$;

-- whoever is deactivated or erased leaves no way in behind
create function app.forget_sign_in() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  delete from totp where person_id = new.id;
  delete from password where person_id = new.id;
  delete from sign_in_step where person_id = new.id;
  update account_notice set to_email = '', data = '{}' where to_email = old.email;
  return new;
end $$;
create trigger forget_sign_in after update of deactivated_at on person for each row when (new.deactivated_at is not null) execute function app.forget_sign_in();

revoke all on function app.post_account_notice, app.account_notice, app.account_notice_sent, app.password_of, app.enter, app.sign_in_by_password, app.resume_sign_in,
  app.finish_sign_in, app.end_other_sessions, app.session_idle, app.refresh_session, app.forget_sign_in from public;
grant execute on function app.post_account_notice, app.password_of, app.sign_in_by_password, app.resume_sign_in, app.finish_sign_in, app.end_other_sessions, app.refresh_session to app_write;
grant execute on function app.session_idle to app_read, app_write;
grant execute on function app.account_notice, app.account_notice_sent to app_worker;
`;
