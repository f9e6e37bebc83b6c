// Changes, their reviews and signatures, and the papers that are signed. Cost and mark-up stand apart, for the firm alone.
export default /* sql */ `
create table document (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  kind text not null check (kind in ('change', 'signed_change')),
  subject_id uuid not null,
  name text not null check (length(name) between 1 and 160),
  sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
  bytes bigint not null check (bytes > 0),
  storage_key text not null unique,
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create index on document (job_id, subject_id);

create table change (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  number integer not null check (number >= 1),
  revision text not null default '' check (revision ~ '^[A-Z]?$'),
  state text not null default 'draft'
    check (state in ('draft', 'in_review', 'issued', 'partly_signed', 'approved', 'declined', 'lapsed', 'withdrawn', 'superseded')),
  title text not null check (length(title) between 3 and 120),
  reason text not null check (length(reason) between 3 and 2000),
  origin text not null check (origin in ('homeowner_wish', 'field_condition', 'design_correction', 'allowance', 'substitution', 'weather')),
  structural boolean not null,
  presentation text not null check (presentation in ('itemized', 'grouped', 'one_sum')),
  no_charge boolean not null,
  -- what the homeowner sees; how it came about stands in change_cost
  charged_cents app.cents not null,
  days integer not null check (days between 0 and 365),
  milestone_id uuid,
  good_until date not null,
  effect_hash text check (effect_hash ~ '^[0-9a-f]{64}$'),
  document_id uuid,
  signed_document_id uuid,
  issued_at timestamptz(3),
  closed_at timestamptz(3),
  closed_by uuid references person (id),
  closed_reason text,
  version integer not null default 1,
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  unique (job_id, number, revision),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, milestone_id) references milestone (firm_id, id),
  foreign key (firm_id, document_id) references document (firm_id, id),
  foreign key (firm_id, signed_document_id) references document (firm_id, id),
  check (not no_charge or charged_cents = 0)
);
create index on change (job_id, number);
alter table schedule_line add foreign key (firm_id, change_id) references change (firm_id, id);

-- the lines as the homeowner sees them
create table change_line (
  firm_id uuid not null,
  job_id uuid not null,
  change_id uuid not null,
  position integer not null,
  description text not null,
  effect text not null check (effect in ('add', 'deduct')),
  cents app.cents not null,
  primary key (change_id, position),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id)
);

create table change_cost (
  firm_id uuid not null,
  job_id uuid not null,
  change_id uuid primary key,
  lines jsonb not null,
  terms jsonb not null,
  own_terms boolean not null,
  terms_reason text not null,
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id)
);

create table change_review (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  change_id uuid not null,
  kind text not null check (kind in ('designer_review', 'engineered_sheet', 'official_approval')),
  file_id uuid not null,
  reviewer_name text not null check (length(reviewer_name) between 2 and 120),
  license text not null check (length(license) <= 60),
  reviewed_on date not null,
  note text not null check (length(note) <= 1000),
  by_person uuid not null references person (id),
  at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id),
  foreign key (firm_id, file_id) references file (firm_id, id)
);
create index on change_review (change_id);

create table change_signature (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  change_id uuid not null,
  person_id uuid not null references person (id),
  typed_name text not null check (length(typed_name) between 2 and 120),
  effect_hash text not null,
  document_sha256 text not null,
  consent_version text not null,
  at timestamptz(3) not null,
  from_address text not null,
  user_agent text not null,
  -- a signature holds for the effect that was shown; when that moves it is asked for again
  superseded_at timestamptz(3),
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id)
);
create unique index one_signature_per_person on change_signature (change_id, person_id) where superseded_at is null;

do $$
declare t text;
begin
  foreach t in array array['document', 'change', 'change_line', 'change_review', 'change_signature'] loop
    execute format('create policy job_data on %I using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]))', t);
  end loop;
  foreach t in array array['document', 'change', 'change_line', 'change_cost', 'change_review', 'change_signature'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
  end loop;
end $$;
create policy firm_only on change_cost using (firm_id = any((select app.my_firms())::uuid[]));

-- A signed change never changes; neither does what was declined, lapsed or withdrawn. Only its joined paper is still to come, once.
create function app.guard_change() returns trigger language plpgsql as $$
begin
  if tg_op = 'DELETE' then
    if old.state not in ('draft', 'in_review') then raise exception 'change %: only a draft goes', old.number using errcode = 'TP020'; end if;
    return old;
  end if;
  if old.state = 'approved' and (to_jsonb(new) - 'signed_document_id') is distinct from (to_jsonb(old) - 'signed_document_id') then
    raise exception 'change %: what is signed stays as it is', old.number using errcode = 'TP020';
  end if;
  if old.signed_document_id is not null and new.signed_document_id is distinct from old.signed_document_id then
    raise exception 'change %: the signed paper stays as it is', old.number using errcode = 'TP020';
  end if;
  if old.state in ('declined', 'lapsed', 'withdrawn', 'superseded') and new.state not in (old.state, 'superseded') then
    raise exception 'change %: % is an end', old.number, old.state using errcode = 'TP020';
  end if;
  -- what was sent out stays what it was, until it is answered
  if old.state in ('issued', 'partly_signed') and (new.charged_cents, new.days, new.title, new.reason, new.good_until) is distinct from
     (old.charged_cents, old.days, old.title, old.reason, old.good_until) then
    raise exception 'change %: what was sent out is not edited', old.number using errcode = 'TP020';
  end if;
  return new;
end $$;
create trigger guarded before update or delete on change for each row execute function app.guard_change();

-- lines and cost follow their change: once it was sent out they stay
create function app.guard_change_part() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare s text;
begin
  select state into s from change where id = coalesce(old.change_id, new.change_id);
  if s not in ('draft', 'in_review') then raise exception 'the parts of a change that was sent out stay' using errcode = 'TP020'; end if;
  return coalesce(new, old);
end $$;
create trigger guarded before insert or update or delete on change_line for each row execute function app.guard_change_part();
create trigger guarded before update or delete on change_cost for each row execute function app.guard_change_part();
create trigger append_only before update or delete on document for each row execute function app.refuse();
create trigger no_truncate before truncate on document for each statement execute function app.refuse();
create trigger no_delete before delete on change_signature for each row execute function app.refuse();
create trigger no_truncate before truncate on change_signature for each statement execute function app.refuse();
revoke all on function app.guard_change, app.guard_change_part from public;

grant select on document, change, change_line, change_cost, change_review, change_signature to app_read, app_write, app_worker;
grant insert, update, delete on change, change_line, change_cost to app_write;
grant insert, update on change to app_worker;
grant insert on change_review, change_signature to app_write;
grant update (superseded_at) on change_signature to app_write;
grant insert on document to app_worker;
`;
