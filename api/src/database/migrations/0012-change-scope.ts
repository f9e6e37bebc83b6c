// What a change builds and takes out, without any price: for the homeowner however the price is shown, for the site and for a designer.
export default /* sql */ `
create table change_scope (
  firm_id uuid not null,
  job_id uuid not null,
  change_id uuid not null,
  position integer not null,
  description text not null,
  effect text not null check (effect in ('add', 'deduct')),
  quantity text not null,
  unit text not null,
  primary key (change_id, position),
  foreign key (firm_id, job_id) references job (firm_id, id),
  foreign key (firm_id, change_id) references change (firm_id, id)
);
insert into change_scope (firm_id, job_id, change_id, position, description, effect, quantity, unit)
  select k.firm_id, k.job_id, k.change_id, l.position, l.value->>'description', l.value->>'effect', l.value->>'quantity', l.value->>'unit'
  from change_cost k, jsonb_array_elements(k.lines) with ordinality as l (value, position) where l.value->>'class' not in ('labor', 'fee');

create policy job_data on change_scope using (firm_id = any((select app.my_firms())::uuid[]) or job_id = any((select app.my_jobs())::uuid[]));
alter table change_scope enable row level security;
alter table change_scope force row level security;
create trigger guarded before insert or update or delete on change_scope for each row execute function app.guard_change_part();
grant select on change_scope to app_read, app_write, app_worker;
grant insert, delete on change_scope to app_write;
`;
