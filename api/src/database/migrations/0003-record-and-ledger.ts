// The record's chains and the ledger. Triggers guard both for every role, so that a mistake in the service can't break them.
export default /* sql */ `
create function app.refuse() returns trigger language plpgsql as $$
begin
  raise exception '% on % is not allowed', tg_op, tg_table_name using errcode = 'TP020';
end $$;

create table record_head (
  firm_id uuid not null,
  job_id uuid not null,
  chain text not null check (chain in ('shared', 'firm')),
  seq bigint not null default 0,
  hash text not null default repeat('0', 64),
  primary key (job_id, chain),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create table record_entry (
  firm_id uuid not null,
  job_id uuid not null,
  chain text not null,
  seq bigint not null,
  text text not null,
  hash text not null,
  -- a copy for queries; the text is what was hashed, since jsonb rewrites numbers
  data jsonb generated always as (text::jsonb) stored,
  primary key (job_id, chain, seq),
  foreign key (job_id, chain) references record_head (job_id, chain)
);

create function app.guard_record() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare h record_head%rowtype;
begin
  select * into h from record_head where job_id = new.job_id and chain = new.chain for no key update;
  if new.seq is distinct from h.seq + 1 then
    raise exception 'record: sequence % after %', new.seq, h.seq using errcode = 'TP010';
  end if;
  if new.hash is distinct from encode(sha256(convert_to(h.hash || E'\\n' || new.text, 'UTF8')), 'hex') then
    raise exception 'record: hash does not follow' using errcode = 'TP011';
  end if;
  update record_head set seq = new.seq, hash = new.hash where job_id = new.job_id and chain = new.chain;
  return new;
end $$;
create trigger follows before insert on record_entry for each row execute function app.guard_record();
create trigger append_only before update or delete on record_entry for each row execute function app.refuse();
create trigger no_truncate before truncate on record_entry for each statement execute function app.refuse();

-- Runs with the caller's rights, so the policies decide who may write in which chain. The head is locked last in a command.
create function app.append_record(p_firm uuid, p_job uuid, p_chain text, p_text text) returns table (seq bigint, hash text)
  language plpgsql as $$
declare h record_head%rowtype; n text;
begin
  select * into h from record_head r where r.job_id = p_job and r.chain = p_chain for no key update;
  if not found then raise exception 'record: no chain % for job %', p_chain, p_job using errcode = 'TP012'; end if;
  n := encode(sha256(convert_to(h.hash || E'\\n' || p_text, 'UTF8')), 'hex');
  insert into record_entry (firm_id, job_id, chain, seq, text, hash) values (p_firm, p_job, p_chain, h.seq + 1, p_text, n);
  return query select h.seq + 1, n;
end $$;

create function app.open_record() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  insert into record_head (firm_id, job_id, chain) values (new.firm_id, new.id, 'shared'), (new.firm_id, new.id, 'firm');
  return null;
end $$;
create trigger opens_record after insert on job for each row execute function app.open_record();

create table ledger_entry (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid not null,
  cause text not null check (cause in ('draw', 'payment', 'refund', 'return', 'dispute', 'fee', 'payout', 'adjustment', 'deposit')),
  cause_id text not null,
  memo text not null,
  at timestamptz(3) not null,
  on_date date not null,
  primary key (id),
  unique (job_id, id),
  unique (job_id, cause, cause_id),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create table ledger_line (
  firm_id uuid not null,
  job_id uuid not null,
  entry_id uuid not null,
  position smallint not null,
  account text not null check (account in ('homeowner_receivable', 'retainage_receivable', 'billed_work', 'deposit_held', 'customer_credit',
    'stripe_clearing', 'bank', 'processing_fees', 'disputed', 'late_interest', 'write_off')),
  -- where the money of a receivable is expected from
  source text check (source in ('homeowner', 'loan')),
  -- debit positive, credit negative
  amount_cents app.cents not null check (amount_cents <> 0),
  primary key (entry_id, position),
  foreign key (job_id, entry_id) references ledger_entry (job_id, id)
);
create index on ledger_line (job_id, account);

create function app.check_balance() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare r jsonb := to_jsonb(new); e uuid := coalesce(r->>'entry_id', r->>'id')::uuid; s numeric; n int;
begin
  select coalesce(sum(amount_cents), 0), count(*) into s, n from ledger_line where entry_id = e;
  if s <> 0 or n < 2 then
    raise exception 'ledger: entry % does not balance (% over % lines)', e, s, n using errcode = 'TP021';
  end if;
  return null;
end $$;
create constraint trigger balanced after insert on ledger_entry deferrable initially deferred for each row execute function app.check_balance();
create constraint trigger balanced after insert on ledger_line deferrable initially deferred for each row execute function app.check_balance();
create trigger append_only before update or delete on ledger_entry for each row execute function app.refuse();
create trigger append_only before update or delete on ledger_line for each row execute function app.refuse();
create trigger no_truncate before truncate on ledger_entry for each statement execute function app.refuse();
create trigger no_truncate before truncate on ledger_line for each statement execute function app.refuse();

do $$
declare t text;
begin
  foreach t in array array['record_head', 'record_entry', 'ledger_entry', 'ledger_line'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
  end loop;
end $$;
create policy chain on record_head using (firm_id = any((select app.my_firms())::uuid[])
  or (chain = 'shared' and job_id = any((select app.my_jobs())::uuid[])));
create policy chain on record_entry using (firm_id = any((select app.my_firms())::uuid[])
  or (chain = 'shared' and job_id = any((select app.my_jobs())::uuid[])));
create policy job_data on ledger_entry using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]));
create policy job_data on ledger_line using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]));

grant select on record_head, record_entry, ledger_entry, ledger_line to app_read, app_write, app_worker;
-- locking the head needs the right to update it; the trigger keeps its content true
grant insert on record_entry, ledger_entry, ledger_line to app_write, app_worker;
grant update (hash) on record_head to app_write, app_worker;
create function app.guard_head() returns trigger language plpgsql as $$
begin
  if current_user not in ('tally_owner') then raise exception 'the head follows its entries' using errcode = 'TP020'; end if;
  return new;
end $$;
create trigger follows_entries before update on record_head for each row execute function app.guard_head();
create trigger keeps_head before delete on record_head for each row execute function app.refuse();
revoke all on function app.append_record, app.refuse, app.guard_record, app.open_record, app.check_balance, app.guard_head from public;
grant execute on function app.append_record to app_write, app_worker;
`;
