// People change their address: a code goes to the new one, word and a way back to the old one.
export default /* sql */ `
create table address_change (
  id uuid primary key,
  person_id uuid not null references person (id),
  old_email text not null,
  new_email text not null check (new_email = lower(new_email)),
  -- empty until the worker has made the code and mailed it
  code_hash bytea,
  tries smallint not null default 0,
  created_at timestamptz(3) not null,
  expires_at timestamptz(3) not null,
  done_at timestamptz(3),
  told_at timestamptz(3),
  undo_hash bytea unique,
  undo_until timestamptz(3),
  undone_at timestamptz(3)
);
create index on address_change (person_id, id desc);
-- no policy: reached only through the functions below
alter table address_change enable row level security;
alter table address_change force row level security;

create function app.ask_for_address(p_id uuid, p_email text, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  insert into address_change (id, person_id, old_email, new_email, created_at, expires_at)
    select p_id, id, email, p_email, p_now, p_now + interval '10 minutes' from person where id = app.actor() and email is not null
$$;

create function app.new_address(p_id uuid, p_now timestamptz) returns table (email text, person_id uuid)
  language sql stable security definer set search_path = public, pg_temp as $$
  select new_email, person_id from address_change where id = p_id and done_at is null and expires_at > p_now
$$;

create function app.set_address_code(p_id uuid, p_hash bytea, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  update address_change set code_hash = p_hash, tries = 0 where id = p_id and done_at is null and expires_at > p_now
$$;

-- A wrong code is a result, so that tries are counted. That an address is taken is told only to whoever has shown that it is theirs.
create function app.change_address(p_session uuid, p_hash bytea, p_now timestamptz, out outcome text, out change_id uuid)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare c address_change%rowtype;
begin
  select * into c from address_change where person_id = app.actor() order by id desc limit 1 for update;
  if not found or c.done_at is not null or c.expires_at <= p_now or c.tries >= 5 or c.code_hash is null then outcome := 'expired'; return; end if;
  if c.code_hash <> p_hash then
    update address_change set tries = tries + 1 where id = c.id;
    outcome := 'wrong';
    return;
  end if;
  begin
    update person set email = c.new_email where id = app.actor();
  exception when unique_violation then
    update address_change set expires_at = p_now where id = c.id;
    outcome := 'taken';
    return;
  end;
  update address_change set done_at = p_now, undo_until = p_now + interval '14 days' where id = c.id;
  update sign_in_code set used_at = p_now where email in (c.old_email, c.new_email) and used_at is null;
  perform app.end_other_sessions(p_session, p_now);
  outcome := 'right';
  change_id := c.id;
end $$;

-- what the old address is told; the token is made by the worker, so that no queue holds it
create function app.address_changed(p_id uuid, p_undo bytea, p_now timestamptz) returns table (old_email text, new_email text, done_at timestamptz, undo_until timestamptz)
  language sql security definer set search_path = public, pg_temp as $$
  update address_change c set undo_hash = p_undo from person p
    where c.id = p_id and p.id = c.person_id and p.deactivated_at is null and c.done_at is not null and c.told_at is null and c.undone_at is null and c.undo_until > p_now
    returning c.old_email, c.new_email, c.done_at, c.undo_until
$$;

create function app.address_change_told(p_id uuid, p_now timestamptz) returns void
  language sql security definer set search_path = public, pg_temp as $$
  update address_change set told_at = p_now where id = p_id and told_at is null
$$;

-- Back to the old address for whoever lives there: everybody goes out, a password goes (somebody else may have set it), and so does a
-- second step that was set up since. Ways back that went to later addresses are over.
create function app.undo_address(p_hash bytea, p_now timestamptz, out outcome text, out email text)
  language plpgsql security definer set search_path = public, pg_temp as $$
declare c address_change%rowtype;
begin
  select * into c from address_change where undo_hash = p_hash for update;
  if not found or c.undone_at is not null or c.undo_until <= p_now then outcome := 'over'; return; end if;
  perform 1 from person where id = c.person_id and deactivated_at is null;
  if not found then outcome := 'over'; return; end if;
  begin
    update person set email = c.old_email where id = c.person_id;
  exception when unique_violation then
    outcome := 'taken';
    return;
  end;
  update address_change set undone_at = coalesce(undone_at, p_now), expires_at = least(expires_at, p_now) where person_id = c.person_id and created_at >= c.created_at;
  delete from password where person_id = c.person_id;
  delete from totp where person_id = c.person_id and coalesce(confirmed_at, created_at) >= c.done_at;
  update sign_in_step set done_at = p_now where person_id = c.person_id and done_at is null;
  update session set ended_at = p_now where person_id = c.person_id and ended_at is null;
  outcome := 'right';
  email := c.old_email;
end $$;

create or replace function app.forget_sign_in() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  delete from totp where person_id = new.id;
  delete from password where person_id = new.id;
  delete from sign_in_step where person_id = new.id;
  delete from address_change where person_id = new.id;
  update account_notice set to_email = '', data = '{}' where to_email = old.email;
  return new;
end $$;

-- what is kept of signing in for a time only
create function app.sweep_sign_in(p_now timestamptz) returns void language sql security definer set search_path = public, pg_temp as $$
  delete from sign_in_step where expires_at < p_now - interval '1 day';
  delete from address_change where created_at < p_now - interval '30 days';
  delete from totp where confirmed_at is null and created_at < p_now - interval '1 day';
  update account_notice set to_email = '', data = '{}' where sent_at < p_now - interval '90 days' and to_email <> '';
$$;

revoke all on function app.ask_for_address, app.new_address, app.set_address_code, app.change_address, app.address_changed, app.address_change_told, app.undo_address,
  app.sweep_sign_in from public;
grant execute on function app.ask_for_address, app.change_address, app.undo_address to app_write;
grant execute on function app.new_address, app.set_address_code, app.address_changed, app.address_change_told, app.sweep_sign_in to app_worker;
`;
