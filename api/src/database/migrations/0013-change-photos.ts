// Pictures that a change is explained with: photos of the job, in their order.
export default /* sql */ `
create table change_photo (
  firm_id uuid not null,
  job_id uuid not null,
  change_id uuid not null,
  position integer not null,
  photo_id uuid not null,
  primary key (change_id, position),
  unique (change_id, photo_id),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id),
  foreign key (firm_id, photo_id) references photo (firm_id, id)
);
create policy job_data on change_photo using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]));
alter table change_photo enable row level security;
alter table change_photo force row level security;
create trigger guarded before insert or update or delete on change_photo for each row execute function app.guard_change_part();
grant select on change_photo to app_read, app_write, app_worker;
grant insert, delete on change_photo to app_write;
`;
