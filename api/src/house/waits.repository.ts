import { Injectable } from '@nestjs/common';
import type { Role } from '@tallypole/shared/schemas/roles';
import type { AllWaits, Wait } from '@tallypole/shared/schemas/house';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class WaitsRepository {
  /** What somebody outside or inside the firm is waited for on a job, oldest first, in one statement. */
  async ofJob(tx: Tx, jobId: string, personId: string): Promise<Wait[]> {
    const rows = await tx.rows<{ wait: Wait }>(`${WAITS} limit 200`, [jobId, personId]);
    return rows.map(({ wait }) => wait);
  }

  /** The same on every job that somebody may see. */
  async ofPerson(tx: Tx, personId: string): Promise<AllWaits['items']> {
    const rows = await tx.rows<{ wait: Wait; job_id: string; job_name: string }>(`${WAITS} limit 200`, [null, personId]);
    return rows.map(({ wait, job_id: jobId, job_name: jobName }) => ({ ...wait, jobId, jobName }));
  }

  /** What somebody is on each of these jobs. */
  async roles(tx: Tx, jobIds: readonly string[]): Promise<Map<string, Role[]>> {
    const rows = await tx.rows<{ id: string; roles: Role[] }>('select id, app.my_roles(id) as roles from unnest($1::uuid[]) as id', [jobIds]);
    return new Map(rows.map(({ id, roles }) => [id, roles]));
  }
}

const awaited = (roles: string, but = `'{}'::uuid[]`) => `array(select m.person_id from member m where m.job_id = j.id and m.role in (${roles}) and m.person_id <> all(${but}))`;
const HOMEOWNERS = `'homeowner'`;

// each table is read once, since under row-level security every further mention of one costs as much as the first
const WAITS = /* sql */ `
  with j as materialized (select * from job where $1::uuid is null or id = $1),
  member as materialized (select distinct m.job_id, m.person_id, m.role from job_member m join j on j.id = m.job_id where m.ended_at is null),
  kept as materialized (
    select k.draw_id, sum(k.kept_cents)::bigint as cents, bool_or(k.state = 'processing') as under_way from payment k join j on j.id = k.job_id where k.source = 'homeowner' group by k.draw_id),
  d as materialized (
    select d.*, d.homeowner_cents - coalesce(k.cents, 0) as unpaid_cents, coalesce(k.under_way, false) as under_way
    from draw d join j on j.id = d.job_id left join kept k on k.draw_id = d.id where d.state in ('submitted', 'approved', 'part_paid')),
  open as materialized (
    select 'milestone_to_prove' as kind, m.id, m.name as title, null::bigint as cents, (m.claimed_at at time zone j.time_zone)::date as since, null::date as due_on,
        ${awaited(`'lender', 'inspector', 'homeowner'`)} as people, j.id as job_id, j.name as job_name
      from milestone m, j where m.job_id = j.id and m.state = 'claimed'
    union all
    select 'change_to_decide', c.id, 'Change ' || c.number || c.revision || ': ' || c.title, c.charged_cents, (c.issued_at at time zone j.time_zone)::date, c.good_until,
        ${awaited(HOMEOWNERS, 'array(select s.person_id from change_signature s where s.change_id = c.id and s.superseded_at is null)')}, j.id, j.name
      from change c, j where c.job_id = j.id and c.state in ('issued', 'partly_signed')
    union all
    select 'draw_to_approve', d.id, 'Draw ' || d.number, coalesce(d.due_cents, (d.submitted->>'dueCents')::bigint), (d.submitted_at at time zone j.time_zone)::date, null,
        ${awaited(HOMEOWNERS, 'array(select a.person_id from draw_approval a where a.draw_id = d.id and a.superseded_at is null)')}, j.id, j.name
      from d, j where d.job_id = j.id and d.state = 'submitted'
    union all
    select 'draw_to_pay', d.id, 'Draw ' || d.number, d.unpaid_cents, (d.approved_at at time zone j.time_zone)::date, d.due_on, ${awaited(HOMEOWNERS)}, j.id, j.name
      from d, j where d.job_id = j.id and d.state in ('approved', 'part_paid') and d.unpaid_cents > 0 and not d.under_way
    union all
    select 'draw_to_fund', d.id, 'Draw ' || d.number, d.loan_cents, (d.approved_at at time zone j.time_zone)::date, d.due_on, ${awaited(`'lender'`)}, j.id, j.name
      from d, j where d.job_id = j.id and d.state in ('approved', 'part_paid') and d.loan_cents > 0 and d.review_state <> 'funded')
  select json_build_object('kind', o.kind, 'id', o.id, 'title', o.title, 'cents', o.cents, 'since', o.since, 'dueOn', o.due_on,
    'mine', $2::uuid = any(o.people), 'waitsFor', (select coalesce(json_agg(coalesce(p.name, p.email) order by p.name), '[]') from person p where p.id = any(o.people))) as wait, o.job_id, o.job_name
  from open o where cardinality(o.people) > 0 order by o.since, o.id`;
