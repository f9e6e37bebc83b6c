import { Injectable } from '@nestjs/common';
import type { MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { Tx } from '../common/unit-of-work.ts';

export interface HouseFacts {
  timeZone: string;
  startOn: string;
  completeBy: string;
  milestones: { id: string; name: string; state: MilestoneState; percent: number; scheduledCents: number; plannedOn: string | null; claimedOn: string | null }[];
  generalCents: number;
  /** Of the latest approved draw: what is billed to date, per milestone (null: general lines). */
  billed: { milestoneId: string | null; cents: number }[];
  /** Of each approved draw: what it billed, per milestone, and what the builder has of it, deposit included. */
  draws: { billed: { milestoneId: string | null; cents: number }[]; paidCents: number }[];
  changes: { id: string; milestoneId: string | null; label: string; pending: boolean }[];
}

@Injectable()
export class HouseRepository {
  /** Everything that the pole needs, in one statement. */
  async find(tx: Tx, jobId: string): Promise<HouseFacts | undefined> {
    return (await tx.one<{ facts: HouseFacts }>(FACTS, [jobId]))?.facts;
  }
}

const BILLED_BY_MILESTONE = (draw: string) => `(select coalesce(json_agg(json_build_object('milestoneId', b.milestone_id, 'cents', b.cents)), '[]') from (
  select s.milestone_id, sum(l.work_cents + l.on_hand_cents)::bigint as cents from draw_line l join schedule_line s on s.id = l.line_id
  where l.draw_id = ${draw} group by s.milestone_id) b)`;

// what a draw adds: its figures to date less those of the approved draw before it
const ADDED_BY_MILESTONE = /* sql */ `(select coalesce(json_agg(json_build_object('milestoneId', b.milestone_id, 'cents', b.cents)), '[]') from (
  select s.milestone_id, sum(l.work_cents + l.on_hand_cents - coalesce(p.work_cents + p.on_hand_cents, 0))::bigint as cents
  from draw_line l join schedule_line s on s.id = l.line_id
  left join draw_line p on p.line_id = l.line_id and p.draw_id = (
    select q.id from draw q where q.job_id = d.job_id and q.approved_at is not null and q.number < d.number order by q.number desc limit 1)
  where l.draw_id = d.id group by s.milestone_id) b)`;

const PAID = /* sql */ `(select coalesce(sum(k.kept_cents), 0)::bigint from payment k where k.draw_id = d.id)
  + (select coalesce(sum(l.amount_cents), 0)::bigint from ledger_entry e join ledger_line l on l.entry_id = e.id and l.account = 'deposit_held'
     where e.job_id = d.job_id and e.cause = 'draw' and e.cause_id = d.id::text)`;

const FACTS = /* sql */ `
  select json_build_object(
    'timeZone', j.time_zone, 'startOn', j.start_on, 'completeBy', j.complete_by,
    'milestones', (select coalesce(json_agg(json_build_object('id', m.id, 'name', m.name, 'state', m.state, 'percent', m.percent,
        'scheduledCents', (select coalesce(sum(s.scheduled_cents), 0)::bigint from schedule_line s where s.milestone_id = m.id),
        'plannedOn', coalesce(m.forecast_on, m.planned_on), 'claimedOn', (m.claimed_at at time zone j.time_zone)::date) order by m.position), '[]')
      from milestone m where m.job_id = j.id),
    'generalCents', (select coalesce(sum(s.scheduled_cents), 0)::bigint from schedule_line s where s.job_id = j.id and s.milestone_id is null),
    'billed', coalesce((select ${BILLED_BY_MILESTONE('d.id')} from draw d where d.job_id = j.id and d.approved_at is not null order by d.number desc limit 1), '[]'),
    'draws', (select coalesce(json_agg(json_build_object('billed', ${ADDED_BY_MILESTONE}, 'paidCents', ${PAID}) order by d.number), '[]')
      from draw d where d.job_id = j.id and d.approved_at is not null),
    'changes', (select coalesce(json_agg(json_build_object('id', c.id, 'milestoneId', c.milestone_id, 'pending', c.state <> 'approved',
        'label', 'Change ' || c.number || c.revision || ': ' || c.title || case when c.state = 'approved' then '' else ', not signed yet' end) order by c.number, c.revision), '[]')
      from change c where c.job_id = j.id and c.state in ('issued', 'partly_signed', 'approved'))) as facts
  from job j where j.id = $1`;
