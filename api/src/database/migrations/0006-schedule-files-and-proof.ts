// The schedule of values, milestones and what proves them: files, photos, inspections.
export default /* sql */ `
create table milestone (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  -- building order, from the ground up
  position integer not null check (position >= 1),
  name text not null check (length(name) between 1 and 120),
  state text not null default 'upcoming' check (state in ('upcoming', 'under_way', 'claimed', 'proven')),
  planned_on date,
  forecast_on date,
  actual_on date,
  -- in place as last seen from outside the firm
  percent app.rate not null default 0,
  -- when work on it began, as the firm said
  started_at timestamptz(3),
  claimed_at timestamptz(3),
  claimed_by uuid references person (id),
  proven_at timestamptz(3),
  proven_by uuid references person (id),
  version integer not null default 1,
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  unique (job_id, position) deferrable initially deferred,
  foreign key (firm_id, job_id) references job (firm_id, id),
  check ((claimed_at is null) = (claimed_by is null)),
  check ((proven_at is null) = (proven_by is null)),
  check ((state = 'proven') = (proven_at is not null))
);

create table schedule_line (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  number text not null check (length(number) <= 20),
  position integer not null check (position >= 1),
  phase text not null check (length(phase) between 1 and 120),
  description text not null check (length(description) between 1 and 300),
  scheduled_cents app.cents not null,
  kind text not null check (kind in ('base', 'allowance', 'contingency', 'change')),
  -- null: a general line, which belongs to the whole job
  milestone_id uuid,
  change_id uuid,
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  unique (job_id, position) deferrable initially deferred,
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, milestone_id) references milestone (firm_id, id),
  check ((kind = 'change') = (change_id is not null))
);
create index on schedule_line (milestone_id);

create table file (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  name text not null check (length(name) between 1 and 160),
  purpose text not null,
  media_type text not null,
  bytes bigint not null check (bytes > 0),
  sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
  storage_key text not null unique,
  -- job: whoever is on the job; firm: the builder alone
  audience text not null check (audience in ('job', 'firm')),
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id)
);
create index on file (job_id, created_at);

create table photo (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  file_id uuid not null,
  milestone_id uuid not null,
  state text not null default 'stored' check (state in ('stored', 'ready', 'unreadable')),
  -- from the picture's own metadata; unknown stays empty
  taken_at timestamptz(3),
  latitude double precision check (latitude between -90 and 90),
  longitude double precision check (longitude between -180 and 180),
  accuracy_m double precision check (accuracy_m >= 0),
  -- 64 bits as hex
  phash char(16),
  width integer,
  height integer,
  -- sizes for display, made by the worker: [{size, key, width, height, bytes}]
  sizes jsonb not null default '[]',
  findings jsonb not null default '[]',
  -- why it could not be read, in a sentence
  trouble text,
  note text not null default '' check (length(note) <= 1000),
  created_by uuid not null references person (id),
  created_at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, file_id) references file (firm_id, id),
  foreign key (firm_id, milestone_id) references milestone (firm_id, id),
  check ((state = 'unreadable') = (trouble is not null)),
  check ((latitude is null) = (longitude is null))
);
create index on photo (job_id, created_at);
create index on photo (milestone_id);
create index on photo (firm_id) where phash is not null;

create table inspection (
  firm_id uuid not null,
  job_id uuid not null,
  id uuid primary key,
  milestone_id uuid not null,
  result text not null check (result in ('passed', 'failed', 'partial')),
  percent app.rate not null,
  note text not null check (length(note) <= 2000),
  seen_on date not null,
  by_person uuid not null references person (id),
  role text not null check (role in ('homeowner', 'lender', 'inspector')),
  at timestamptz(3) not null,
  unique (firm_id, id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, milestone_id) references milestone (firm_id, id),
  check (result <> 'passed' or percent = 10000),
  check (result <> 'partial' or percent < 10000)
);
create index on inspection (milestone_id, at);
create index on inspection (job_id);
create trigger append_only before update or delete on inspection for each row execute function app.refuse();
create trigger no_truncate before truncate on inspection for each statement execute function app.refuse();

do $$
declare t text;
begin
  foreach t in array array['milestone', 'schedule_line', 'photo', 'inspection'] loop
    execute format('create policy job_data on %I using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]))', t);
  end loop;
  foreach t in array array['milestone', 'schedule_line', 'file', 'photo', 'inspection'] loop
    execute format('alter table %I enable row level security', t);
    execute format('alter table %I force row level security', t);
  end loop;
end $$;
create policy job_data on file using (firm_id = any((select app.my_firms())::uuid[])
  or (audience = 'job' and job_id = any((select app.my_jobs())::uuid[])));

grant select on milestone, schedule_line, file, photo, inspection to app_read, app_write, app_worker;
grant insert, update, delete on milestone, schedule_line to app_write, app_worker;
grant insert on file, photo, inspection to app_write, app_worker;
grant update on photo to app_worker;
-- to lock a photo and to write a word under it
grant update (note) on photo to app_write;

-- where the site is: the firm enters it, photos are compared with it
alter table job add column site_radius_m integer not null default 75 check (site_radius_m between 10 and 5000);
`;
