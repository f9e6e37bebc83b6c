// The loan, draws with their decisions, the lender's review, payments and what Stripe tells us.
export default /* sql */ `
create table loan (
  firm_id uuid not null,
  job_id uuid not null unique,
  id uuid primary key,
  lender_name text not null check (length(lender_name) between 2 and 120),
  amount_cents app.cents not null check (amount_cents > 0),
  -- without interest reserve, land and fees
  construction_cents app.cents not null check (construction_cents > 0 and construction_cents <= amount_cents),
  -- what the homeowner puts in before the loan is drawn on
  equity_first_cents app.cents not null check (equity_first_cents >= 0),
  holdback_rate app.rate not null,
  -- a change above this sum needs the lender's word
  consent_limit_cents app.cents not null check (consent_limit_cents >= 0),
  -- who carries what the loan doesn't pay in a draw
  shortfall text not null check (shortfall in ('homeowner', 'carried')),
  route text not null check (route in ('builder', 'borrower', 'joint_check', 'title_company')),
  version integer not null default 1,
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id)
);

create table draw (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  number integer not null check (number >= 1),
  state text not null default 'draft' check (state in ('draft', 'submitted', 'returned', 'approved', 'part_paid', 'paid', 'void')),
  review_state text not null default 'not_needed' check (review_state in ('not_needed', 'ordered', 'inspected', 'allowed', 'funded')),
  through_on date not null,
  note text not null default '' check (length(note) <= 2000),
  -- what it rested on and came to when it was sent, so that a later difference can be named
  submitted jsonb,
  submitted_at timestamptz(3),
  submitted_by uuid references person (id),
  return_reason text,
  -- what it rested on when it was approved: every page computes from this, hence the same cents
  basis jsonb,
  effect_hash text,
  approved_at timestamptz(3),
  due_on date,
  due_cents app.cents,
  -- who pays: the parts add up to what is due; a lender's word may move them, never their sum
  homeowner_cents app.cents,
  loan_cents app.cents,
  version integer not null default 1,
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  unique (job_id, number),
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  check ((state in ('approved', 'part_paid', 'paid')) = (approved_at is not null)),
  check (approved_at is null or (basis is not null and effect_hash is not null and due_on is not null)),
  check (approved_at is null or due_cents = homeowner_cents + loan_cents)
);
-- figures are cumulative: the next draw starts from the last one's end
create unique index one_open_draw on draw (job_id) where state in ('draft', 'submitted', 'returned');

create table draw_line (
  firm_id uuid not null,
  job_id uuid not null,
  draw_id uuid not null,
  line_id uuid not null,
  -- to date
  work_cents app.cents not null,
  on_hand_cents app.cents not null check (on_hand_cents >= 0),
  primary key (draw_id, line_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id),
  foreign key (firm_id, line_id) references schedule_line (firm_id, id)
);
create index on draw_line (job_id);

create table draw_photo (
  firm_id uuid not null,
  job_id uuid not null,
  draw_id uuid not null,
  photo_id uuid not null,
  primary key (draw_id, photo_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id),
  foreign key (firm_id, photo_id) references photo (firm_id, id)
);

create table draw_objection (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  draw_id uuid not null,
  line_id uuid not null,
  -- what of this draw on the line is not approved
  objected_cents app.cents not null check (objected_cents > 0),
  reason text not null check (length(reason) between 3 and 1000),
  by_person uuid not null references person (id),
  at timestamptz(3) not null,
  withdrawn_at timestamptz(3),
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id),
  foreign key (firm_id, line_id) references schedule_line (firm_id, id)
);
create unique index one_objection_per_line on draw_objection (draw_id, line_id) where withdrawn_at is null;

create table draw_approval (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  draw_id uuid not null,
  person_id uuid not null references person (id),
  effect_hash text not null check (effect_hash ~ '^[0-9a-f]{64}$'),
  at timestamptz(3) not null,
  -- an approval holds for the effect that was shown; when that changes it is asked for again
  superseded_at timestamptz(3),
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id)
);
create unique index one_approval_per_person on draw_approval (draw_id, person_id) where superseded_at is null;

create table lender_review (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  draw_id uuid not null,
  step text not null check (step in ('inspected', 'allowed')),
  on_date date not null,
  note text not null check (length(note) <= 2000),
  -- what must be met before money is sent; empty: nothing
  conditions text not null default '' check (length(conditions) <= 2000),
  by_person uuid not null references person (id),
  at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id)
);
create index on lender_review (draw_id, at);

-- the share of a line's scheduled value that the lender takes as built, to date
create table lender_allowance (
  firm_id uuid not null,
  job_id uuid not null,
  review_id uuid not null,
  line_id uuid not null,
  percent app.rate not null,
  reason text not null default '' check (length(reason) <= 1000),
  primary key (review_id, line_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, review_id) references lender_review (firm_id, id),
  foreign key (firm_id, line_id) references schedule_line (firm_id, id)
);

create table payment (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  -- null: the deposit
  draw_id uuid,
  method text not null check (method in ('checkout', 'check', 'wire', 'loan_advance')),
  source text not null check (source in ('homeowner', 'loan')),
  state text not null check (state in ('started', 'processing', 'settled', 'failed', 'canceled', 'refunded', 'returned', 'disputed')),
  amount_cents app.cents not null check (amount_cents > 0),
  -- what the builder has of it now: 0 until settled, less what went back
  kept_cents app.cents not null default 0 check (kept_cents between 0 and amount_cents),
  fee_cents app.cents check (fee_cents >= 0),
  reference text not null default '' check (length(reference) <= 120),
  -- the day the payer started it, which is what late interest looks at
  started_on date not null,
  settled_on date,
  trouble text,
  account text,
  session_id text,
  intent_id text,
  payer_id uuid not null references person (id),
  checked_at timestamptz(3),
  version integer not null default 1,
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  unique (account, session_id),
  unique (account, intent_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id)
);
-- a second tab, a second homeowner, a second server: one payment at a time
create unique index one_payment_under_way on payment (draw_id) where method = 'checkout' and state in ('started', 'processing');
create index on payment (job_id);
create index on payment (draw_id);
create index on payment (firm_id) where state in ('started', 'processing');

create table lender_funding (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  draw_id uuid not null,
  payment_id uuid not null unique,
  amount_cents app.cents not null check (amount_cents > 0),
  funded_on date not null,
  reference text not null check (length(reference) between 1 and 120),
  route text not null check (route in ('builder', 'borrower', 'joint_check', 'title_company')),
  by_person uuid not null references person (id),
  at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, draw_id) references draw (firm_id, id),
  foreign key (firm_id, payment_id) references payment (firm_id, id)
);
create index on lender_funding (draw_id);

-- one try to get a payment page from Stripe, with a random key of its own that is stored before the call
create table payment_attempt (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  payment_id uuid not null,
  number integer not null check (number >= 1),
  stripe_key uuid not null unique,
  state text not null default 'waiting' check (state in ('waiting', 'open', 'over')),
  -- set before the first call: from then on the object may exist over there
  tried_at timestamptz(3),
  session_id text,
  url text,
  expires_at timestamptz(3),
  trouble text,
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  unique (payment_id, number),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, payment_id) references payment (firm_id, id)
);
create unique index one_live_attempt on payment_attempt (payment_id) where state <> 'over';

-- the builder's account at Stripe: nobody outside the firm may read this
create table stripe_account (
  firm_id uuid primary key references firm (id),
  account text unique,
  stripe_key uuid not null unique,
  tried_at timestamptz(3),
  charges_enabled boolean not null default false,
  payouts_enabled boolean not null default false,
  details_submitted boolean not null default false,
  link_url text,
  link_expires_at timestamptz(3),
  trouble text,
  checked_at timestamptz(3),
  -- up to where the sweep has read this account's events
  events_until timestamptz(3) not null,
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null
);

create table stripe_event (
  account text not null,
  id text not null,
  firm_id uuid references firm (id),
  type text not null,
  object_id text not null,
  payment_intent text,
  created_at timestamptz(3) not null,
  received_at timestamptz(3) not null,
  via text not null check (via in ('webhook', 'sweep')),
  handled_at timestamptz(3),
  primary key (account, id)
);
create index on stripe_event (firm_id) where handled_at is null;

do $$
declare t text;
begin
  foreach t in array array['loan', 'draw', 'draw_line', 'draw_photo', 'draw_objection', 'draw_approval', 'lender_review', 'lender_allowance',
      'payment', 'lender_funding', 'payment_attempt'] loop
    execute format('create policy job_data on %I using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]))', t);
  end loop;
  foreach t in array array['stripe_account', 'stripe_event'] loop
    execute format('create policy firm_only on %I using (firm_id = any((select app.my_firms())::uuid[]))', t);
  end loop;
  foreach t in array array['loan', 'draw', 'draw_line', 'draw_photo', 'draw_objection', 'draw_approval', 'lender_review', 'lender_allowance',
      'payment', 'lender_funding', 'payment_attempt', 'stripe_account', 'stripe_event'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
    execute format('grant select on %I to app_read, app_write, app_worker', t);
  end loop;
  foreach t in array array['draw_objection', 'draw_approval', 'lender_review', 'lender_allowance', 'lender_funding', 'payment', 'payment_attempt'] loop
    execute format('create trigger kept before delete on %I for each row execute function app.refuse()', t);
  end loop;
  foreach t in array array['lender_review', 'lender_allowance', 'lender_funding'] loop
    execute format('create trigger append_only before update on %I for each row execute function app.refuse()', t);
  end loop;
end $$;

grant insert, update on loan, draw, payment, payment_attempt to app_write, app_worker;
grant insert, update, delete on draw_line, draw_photo to app_write, app_worker;
grant insert on draw_objection, draw_approval, lender_review, lender_allowance, lender_funding to app_write, app_worker;
grant update (withdrawn_at) on draw_objection to app_write;
grant update (superseded_at) on draw_approval to app_write;
grant insert, update on stripe_account to app_write, app_worker;
grant insert, update on stripe_event to app_worker;

-- An approved draw never changes: only its payment, the lender's word and the split between payers move on.
create function app.guard_draw() returns trigger language plpgsql as $$
begin
  if (to_jsonb(new) - '{state,review_state,homeowner_cents,loan_cents,version}'::text[]) is distinct from
     (to_jsonb(old) - '{state,review_state,homeowner_cents,loan_cents,version}'::text[]) then
    raise exception 'an approved draw does not change' using errcode = 'TP030';
  end if;
  if new.state not in ('approved', 'part_paid', 'paid') then
    raise exception 'an approved draw stays approved' using errcode = 'TP030';
  end if;
  return new;
end $$;
create trigger approved_stays before update on draw for each row when (old.approved_at is not null) execute function app.guard_draw();
create function app.guard_void_draw() returns trigger language plpgsql as $$
begin
  raise exception 'a void draw does not change' using errcode = 'TP030';
end $$;
create trigger void_stays before update on draw for each row when (old.state = 'void') execute function app.guard_void_draw();
create trigger kept before delete on draw for each row execute function app.refuse();

-- with its approval a line that was objected to falls to what is approved; what was asked stays in draw.submitted
create function app.lowers_line(p_draw uuid, p_old jsonb, p_new jsonb) returns boolean
  language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from draw d join draw_objection o on o.draw_id = d.id and o.withdrawn_at is null
      where d.id = p_draw and d.state = 'submitted' and o.line_id = (p_old->>'line_id')::uuid)
    and p_new->>'line_id' = p_old->>'line_id' and p_new->>'draw_id' = p_old->>'draw_id'
    and (p_new->>'work_cents')::bigint <= (p_old->>'work_cents')::bigint
    and (p_new->>'on_hand_cents')::bigint <= (p_old->>'on_hand_cents')::bigint
$$;

-- lines and photos of a draw that was sent stay as they were sent, until it comes back
create function app.guard_draw_part() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare d uuid := coalesce(to_jsonb(new)->>'draw_id', to_jsonb(old)->>'draw_id')::uuid;
begin
  perform 1 from draw where id = d and state in ('draft', 'returned');
  if not found and not (tg_op = 'UPDATE' and tg_table_name = 'draw_line' and app.lowers_line(d, to_jsonb(old), to_jsonb(new))) then
    raise exception 'the draw was sent' using errcode = 'TP030';
  end if;
  if tg_op = 'DELETE' then return old; end if;
  return new;
end $$;
create trigger sent_stays before insert or update or delete on draw_line for each row execute function app.guard_draw_part();
create trigger sent_stays before insert or update or delete on draw_photo for each row execute function app.guard_draw_part();

-- what was paid stays what it was: its sum, its draw, its payer
create function app.guard_payment() returns trigger language plpgsql as $$
begin
  if (new.firm_id, new.job_id, new.id, new.draw_id, new.method, new.source, new.amount_cents, new.started_on, new.payer_id)
     is distinct from (old.firm_id, old.job_id, old.id, old.draw_id, old.method, old.source, old.amount_cents, old.started_on, old.payer_id) then
    raise exception 'a payment does not change' using errcode = 'TP030';
  end if;
  return new;
end $$;
create trigger stays before update on payment for each row execute function app.guard_payment();

-- who is to be told on a job, by role; whoever is on the job may ask, since people of the firm are in nobody else's view
create function app.to_tell(p_job uuid, p_roles text[]) returns table (person_id uuid, role text)
  language sql stable security definer set search_path = public, pg_temp as $$
  select distinct on (x.person_id) x.person_id, x.role from (
    select m.person_id, m.role from job j join firm_member m on m.firm_id = j.firm_id where j.id = p_job
    union all select person_id, role from job_member where job_id = p_job and ended_at is null) x
  where x.role = any(p_roles)
    and (p_job = any(app.my_jobs()) or exists (select 1 from job j where j.id = p_job and j.firm_id = any(app.my_firms())))
  order by x.person_id, x.role
$$;

-- homeowners who were invited and have not joined: where all must decide, they are waited for too
create function app.homeowners_awaited(p_job uuid) returns integer language sql stable security definer set search_path = public, pg_temp as $$
  select count(distinct i.email)::int from invitation i join job j on j.id = i.job_id
  where i.job_id = p_job and i.role = 'homeowner' and i.accepted_at is null and i.revoked_at is null
    and (j.id = any(app.my_jobs()) or j.firm_id = any(app.my_firms()))
$$;

-- whether the builder of a job can be paid through Stripe; the account itself stays the firm's
create function app.takes_payments(p_job uuid) returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select exists (select 1 from job j join stripe_account a on a.firm_id = j.firm_id
    where j.id = p_job and a.charges_enabled and (j.id = any(app.my_jobs()) or j.firm_id = any(app.my_firms())))
$$;

-- An event is stored before it is handled; its signature was checked. Says whose it is and whether it is new.
create function app.store_stripe_event(p_account text, p_id text, p_type text, p_object text, p_intent text, p_created timestamptz, p_now timestamptz,
  out firm_id uuid, out is_new boolean) language plpgsql security definer set search_path = public, pg_temp as $$
begin
  select a.firm_id into firm_id from stripe_account a where a.account = p_account;
  insert into stripe_event (account, id, firm_id, type, object_id, payment_intent, created_at, received_at, via)
    values (p_account, p_id, firm_id, p_type, p_object, p_intent, p_created, p_now, 'webhook') on conflict (account, id) do nothing;
  is_new := found;
end $$;

-- the worker's round: firms with an account, oldest look first
create function app.stripe_firms() returns table (firm_id uuid) language sql stable security definer set search_path = public, pg_temp as $$
  select a.firm_id from stripe_account a where a.account is not null order by a.events_until
$$;

revoke all on function app.lowers_line, app.guard_draw, app.guard_void_draw, app.guard_draw_part, app.guard_payment, app.to_tell, app.homeowners_awaited, app.takes_payments,
  app.store_stripe_event, app.stripe_firms from public;
grant execute on function app.to_tell, app.homeowners_awaited, app.takes_payments to app_read, app_write, app_worker;
grant execute on function app.store_stripe_event to app_write;
grant execute on function app.stripe_firms to app_worker;
`;
