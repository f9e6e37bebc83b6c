import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import { KEPT, PAYMENT_JSON } from '../payments/payment-sql.repository.ts';
import type { DrawFacts } from './draw-facts.ts';

const instant = (column: string) => `to_char(${column} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;
const list = (object: string, order: string, from: string) => `(select coalesce(json_agg(json_build_object(${object}) order by ${order}), '[]') from ${from})`;
const nameOf = (alias: string) => `coalesce(${alias}.name, ${alias}.email, 'Somebody')`;

@Injectable()
export class DrawFactsRepository {
  /** All that one draw's page and acts need, in one statement. */
  async find(tx: Tx, jobId: string, drawId: string): Promise<DrawFacts | undefined> {
    return (await tx.one<{ facts: DrawFacts }>(FACTS, [jobId, drawId]))?.facts;
  }
}

const JOB = /* sql */ `json_build_object('id', j.id, 'firmId', j.firm_id, 'name', j.name, 'firmName', f.name, 'timeZone', j.time_zone, 'style', j.style,
  'contractSumCents', j.contract_sum_cents, 'changesApprovedCents', j.changes_approved_cents, 'retainageRate', j.retainage_rate,
  'depositReceivedCents', (select coalesce(sum(k.kept_cents), 0)::bigint from payment k where k.job_id = j.id and k.draw_id is null),
  'startOn', j.start_on, 'completeBy', j.complete_by, 'reviewDays', j.review_days, 'paymentDays', j.payment_days, 'homeownersSign', j.homeowners_sign)`;

const DRAW = /* sql */ `json_build_object('id', d.id, 'number', d.number, 'state', d.state, 'reviewState', d.review_state, 'throughOn', d.through_on,
  'note', d.note, 'returnReason', d.return_reason, 'basis', d.basis, 'effectHash', d.effect_hash, 'submittedAt', ${instant('d.submitted_at')},
  'approvedAt', ${instant('d.approved_at')}, 'dueOn', d.due_on, 'dueCents', d.due_cents, 'homeownerCents', d.homeowner_cents, 'loanCents', d.loan_cents,
  'version', d.version, 'paidHomeownerCents', ${KEPT('homeowner')}, 'paidLoanCents', ${KEPT('loan')})`;

const LINES = list(
  `'id', s.id, 'number', s.number, 'phase', s.phase, 'description', s.description, 'kind', s.kind, 'milestoneId', s.milestone_id,
   'scheduledCents', s.scheduled_cents, 'workCents', l.work_cents, 'onHandCents', l.on_hand_cents`,
  's.position',
  'schedule_line s left join draw_line l on l.line_id = s.id and l.draw_id = d.id where s.job_id = j.id',
);

const MILESTONES = list(
  `'id', m.id, 'name', m.name, 'state', m.state, 'percent', m.percent, 'provenOn', (m.proven_at at time zone j.time_zone)::date`,
  'm.position',
  'milestone m where m.job_id = j.id',
);

const PREVIOUS = /* sql */ `(select json_build_object('basis', p.basis, 'loanCentsToDate',
    (select sum(q.loan_cents)::bigint from draw q where q.job_id = j.id and q.approved_at is not null and q.number < d.number))
  from draw p where p.job_id = j.id and p.approved_at is not null and p.number < d.number order by p.number desc limit 1)`;

const LOAN = /* sql */ `(select json_build_object('lenderName', o.lender_name, 'constructionCents', o.construction_cents, 'equityFirstCents', o.equity_first_cents,
  'holdbackRate', o.holdback_rate, 'shortfall', o.shortfall) from loan o where o.job_id = j.id)`;

const OBJECTIONS = list(
  `'id', o.id, 'lineId', o.line_id, 'objectedCents', o.objected_cents, 'reason', o.reason, 'by', ${nameOf('p')}`,
  'o.at',
  'draw_objection o left join person p on p.id = o.by_person where o.draw_id = d.id and o.withdrawn_at is null',
);

const ALLOWED = /* sql */ `(select coalesce((select json_agg(json_build_object('lineId', a.line_id, 'percent', a.percent)) from lender_allowance a where a.review_id = r.id), '[]')
  from lender_review r where r.draw_id = d.id and r.step = 'allowed' and r.at >= d.submitted_at order by r.at desc, r.id desc limit 1)`;

const HOMEOWNERS = list(
  `'id', m.person_id, 'name', ${nameOf('p')}`,
  'm.created_at, m.person_id',
  `job_member m left join person p on p.id = m.person_id where m.job_id = j.id and m.role = 'homeowner' and m.ended_at is null`,
);

const APPROVALS = list(
  `'id', a.person_id, 'name', ${nameOf('p')}, 'at', ${instant('a.at')}, 'effectHash', a.effect_hash`,
  'a.at',
  'draw_approval a left join person p on p.id = a.person_id where a.draw_id = d.id and a.superseded_at is null',
);

const PHOTOS = list(
  `'id', h.id, 'milestoneId', h.milestone_id, 'note', h.note, 'takenAt', ${instant('h.taken_at')}`,
  'h.taken_at nulls last, h.id',
  'draw_photo x join photo h on h.id = x.photo_id where x.draw_id = d.id',
);

const REVIEWS = list(
  `'step', r.step, 'onDate', r.on_date, 'note', r.note, 'conditions', r.conditions, 'by', ${nameOf('p')}, 'at', ${instant('r.at')}`,
  'r.at, r.id',
  'lender_review r left join person p on p.id = r.by_person where r.draw_id = d.id',
);

const FUNDINGS = list(
  `'amountCents', u.amount_cents, 'fundedOn', u.funded_on, 'reference', u.reference, 'by', ${nameOf('p')}, 'received', k.state = 'settled'`,
  'u.at',
  'lender_funding u join payment k on k.id = u.payment_id left join person p on p.id = u.by_person where u.draw_id = d.id',
);

const PAYMENTS = /* sql */ `(select coalesce(json_agg(${PAYMENT_JSON} order by p.created_at, p.id), '[]') from payment p where p.draw_id = d.id)`;

const FACTS = /* sql */ `
  select json_build_object('job', ${JOB}, 'draw', ${DRAW}, 'lines', ${LINES}, 'milestones', ${MILESTONES}, 'previous', ${PREVIOUS}, 'loan', ${LOAN},
    'objections', ${OBJECTIONS}, 'allowed', ${ALLOWED}, 'homeowners', ${HOMEOWNERS}, 'invitedHomeowners', app.homeowners_awaited(j.id),
    'approvals', ${APPROVALS}, 'photos', ${PHOTOS}, 'reviews', ${REVIEWS}, 'fundings', ${FUNDINGS}, 'payments', ${PAYMENTS}) as facts
  from draw d join job j on j.id = d.job_id join firm f on f.id = j.firm_id where d.job_id = $1 and d.id = $2`;
