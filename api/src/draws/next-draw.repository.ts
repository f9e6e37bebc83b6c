/**
 * SQL, with the job as `j`: what its next draw follows from, as NextDrawFacts. The draw that was sent and isn't decided yet
 * stands beside, with what it asks per line.
 */
export const NEXT_DRAW = /* sql */ `json_build_object(
  'job', json_build_object('style', j.style, 'contractSumCents', j.contract_sum_cents, 'changesApprovedCents', j.changes_approved_cents, 'retainageRate', j.retainage_rate,
    'depositReceivedCents', (select coalesce(sum(k.kept_cents), 0)::bigint from payment k where k.job_id = j.id and k.draw_id is null), 'startOn', j.start_on, 'completeBy', j.complete_by),
  'lines', (select coalesce(json_agg(json_build_object('id', s.id, 'number', s.number, 'phase', s.phase, 'description', s.description, 'kind', s.kind,
      'milestoneId', s.milestone_id, 'scheduledCents', s.scheduled_cents, 'workCents', null, 'onHandCents', null) order by s.position), '[]') from schedule_line s where s.job_id = j.id),
  'milestones', (select coalesce(json_agg(json_build_object('id', m.id, 'name', m.name, 'state', m.state, 'percent', m.percent,
      'provenOn', (m.proven_at at time zone j.time_zone)::date) order by m.position), '[]') from milestone m where m.job_id = j.id),
  'previous', (select json_build_object('basis', p.basis, 'loanCentsToDate',
      (select sum(q.loan_cents)::bigint from draw q where q.job_id = j.id and q.approved_at is not null))
    from draw p where p.job_id = j.id and p.approved_at is not null order by p.number desc limit 1),
  'sent', (select json_build_object('throughOn', d.through_on, 'lines', (select coalesce(json_agg(json_build_object('id', l.line_id, 'workCents', l.work_cents, 'onHandCents', l.on_hand_cents)), '[]')
      from draw_line l where l.draw_id = d.id)) from draw d where d.job_id = j.id and d.state = 'submitted' order by d.number desc limit 1),
  'loan', (select json_build_object('lenderName', o.lender_name, 'constructionCents', o.construction_cents, 'equityFirstCents', o.equity_first_cents,
      'holdbackRate', o.holdback_rate, 'shortfall', o.shortfall) from loan o where o.job_id = j.id))`;
