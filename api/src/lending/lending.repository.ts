import { Injectable } from '@nestjs/common';
import type { LendingRow } from '@tallypole/shared/schemas/lending';
import type { Tx } from '../common/unit-of-work.ts';

export type LendingFacts = Omit<LendingRow, 'blocker' | 'approvals' | 'dueCents' | 'loanOpenCents' | 'provenCents' | 'billedCents'> & {
  /** Scheduled value, work billed to date, and how far the milestone was seen (null: a general line), of each line. */
  lines: [scheduledCents: number, workCents: number, seenRate: number | null][];
  approved: boolean;
  given: number;
  homeowners: number;
  invited: number;
  sign: 'one' | 'all';
  dueCents: number;
};

@Injectable()
export class LendingRepository {
  /** The draws of all jobs on which the reader is a lender that the loan still has to pay, the longest waiting first. One statement. */
  async queue(tx: Tx): Promise<LendingFacts[]> {
    const row = await tx.one<{ rows: LendingFacts[] }>(QUEUE);
    return row?.rows ?? [];
  }
}

const QUEUE = /* sql */ `
  with mine as (select m.job_id from job_member m where m.person_id = app.actor() and m.role = 'lender' and m.ended_at is null),
  waiting as (
    select d.* from draw d join mine on mine.job_id = d.job_id
    where d.review_state in ('ordered', 'inspected', 'allowed') and d.state in ('submitted', 'returned', 'approved', 'part_paid', 'paid')
    order by d.submitted_at limit 400),
  work as (
    select l.draw_id, json_agg(json_build_array(s.scheduled_cents, l.work_cents, case when s.milestone_id is null then null else coalesce(m.percent, 0) end)) as lines
    from waiting w join draw_line l on l.draw_id = w.id join schedule_line s on s.id = l.line_id left join milestone m on m.id = s.milestone_id group by l.draw_id)
  select coalesce(json_agg(json_build_object('jobId', j.id, 'jobName', j.name, 'firmName', f.name, 'drawId', d.id, 'number', d.number, 'state', d.state,
    'reviewState', d.review_state, 'throughOn', d.through_on, 'dueOn', d.due_on, 'submittedAt', to_char(d.submitted_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'),
    'approved', d.approved_at is not null, 'dueCents', coalesce(d.due_cents, (d.submitted->>'dueCents')::bigint, 0),
    'loanCents', coalesce(d.loan_cents, (d.submitted->>'loanCents')::bigint, 0),
    'sentCents', (select coalesce(sum(u.amount_cents), 0)::bigint from lender_funding u where u.draw_id = d.id),
    'lines', coalesce(w.lines, '[]'),
    'photos', (select count(*) from draw_photo x where x.draw_id = d.id),
    'given', (select count(*) from draw_approval a where a.draw_id = d.id and a.superseded_at is null),
    'homeowners', (select count(*) from job_member h where h.job_id = j.id and h.role = 'homeowner' and h.ended_at is null),
    'invited', coalesce(aw.awaited, 0), 'sign', j.homeowners_sign,
    'conditions', coalesce((select r.conditions from lender_review r where r.draw_id = d.id and r.step = 'allowed' and r.at >= d.submitted_at order by r.at desc, r.id desc limit 1), ''))
    order by d.submitted_at), '[]') as rows
  from waiting d join job j on j.id = d.job_id join firm f on f.id = j.firm_id left join work w on w.draw_id = d.id
    left join app.homeowners_awaited_each(array(select job_id from waiting)) aw on aw.job_id = j.id`;
