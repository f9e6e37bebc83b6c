import { minus } from '@tallypole/shared/money';
import type { Draw, DrawLine, DrawRow } from '@tallypole/shared/schemas/draws';
import { dueOnOf } from './due-on.ts';
import { basisOf, figuresOf, type DrawFigures } from './draw-figures.ts';
import type { DrawBasis, DrawFacts } from './draw-facts.ts';
import type { StoredRow } from './draws.repository.ts';

interface Reader {
  personId: string;
  forFirm: boolean;
  today: string;
}

/** A draw as its page shows it, to whoever may read it. */
export function drawView(facts: DrawFacts, reader: Reader): Draw {
  const basis = basisOf(facts);
  const figures = figuresOf(basis, facts.allowed);
  const { draw, job, approvals, homeowners } = facts;
  const { steps, summary } = figures.computed;
  const current = approvals.filter(({ effectHash }) => draw.state !== 'submitted' || effectHash === figures.effectHash);
  const { basis: _basis, returnReason, note, version, ...row } = draw;
  return {
    ...rowOf(row, figures),
    version,
    note,
    returnReason,
    jobName: job.name,
    firmName: job.firmName,
    lines: basis.lines.map((line, i) => lineView(line, i, basis, figures, facts)),
    milestones: basis.milestones,
    summary,
    steps: { ...steps, homeowner: figures.who.steps.homeowner, loan: figures.who.steps.loan },
    lenderName: basis.loan?.lenderName ?? null,
    effectHash: draw.effectHash ?? figures.effectHash,
    dueOnIfToday: draw.dueOn ?? dueOnOf(job, draw.submittedAt, reader.today),
    approvals: current.map(({ id, name, at }) => ({ id, name, at })),
    awaited: draw.state === 'submitted' ? homeowners.filter(({ id }) => !current.some((approval) => approval.id === id)) : [],
    invitedHomeowners: facts.invitedHomeowners,
    photos: facts.photos,
    reviews: facts.reviews,
    fundings: facts.fundings,
    payments: reader.forFirm ? facts.payments : facts.payments.map((payment) => ({ ...payment, feeCents: null })),
    approvedByMe: current.some(({ id }) => id === reader.personId),
  };
}

type Stored = Omit<StoredRow, 'submittedAt' | 'approvedAt'> & Pick<StoredRow, 'submittedAt' | 'approvedAt'>;

/** A row with its sums: stored once it is approved, computed before. */
export function rowOf(row: Stored, figures: DrawFigures | null): DrawRow {
  const { id, number, state, reviewState, throughOn, dueOn, submittedAt, approvedAt, paidHomeownerCents, paidLoanCents } = row;
  const dueCents = row.dueCents ?? figures?.computed.summary.dueNowCents ?? 0;
  const homeownerCents = row.homeownerCents ?? figures?.homeownerCents ?? 0;
  const loanCents = row.loanCents ?? figures?.loanCents ?? 0;
  const approved = approvedAt !== null;
  const openHomeownerCents = approved ? minus(homeownerCents, paidHomeownerCents) : 0;
  const openLoanCents = approved ? minus(loanCents, paidLoanCents) : 0;
  return { id, number, state, reviewState, throughOn, dueCents, homeownerCents, loanCents, paidHomeownerCents, paidLoanCents, openHomeownerCents, openLoanCents, dueOn, submittedAt, approvedAt };
}

function lineView(line: DrawBasis['lines'][number], i: number, basis: DrawBasis, figures: DrawFigures, facts: DrawFacts): DrawLine {
  const input = basis.draw.lines[i];
  const computed = figures.computed.lines[i];
  if (!input || !computed) throw new Error(`Line ${line.id} of draw ${facts.draw.id} was not computed.`);
  const objection = facts.objections.find(({ lineId }) => lineId === line.id);
  const allowed = facts.allowed && (facts.allowed.find(({ lineId }) => lineId === line.id)?.percent ?? null);
  return {
    lineId: line.id,
    number: line.number,
    phase: line.phase,
    description: line.description,
    kind: line.kind,
    milestoneId: line.milestoneId,
    scheduledCents: input.scheduledCents,
    workCents: input.workCents,
    onHandCents: input.onHandCents,
    workRate: computed.workRate,
    billedRate: computed.billedRate,
    billedBeforeCents: minus(computed.billedCents, computed.thisDrawCents),
    thisDrawCents: computed.thisDrawCents,
    leftCents: computed.leftCents,
    retainageCents: computed.retainageCents,
    objection: objection ? { id: objection.id, objectedCents: objection.objectedCents, reason: objection.reason, by: objection.by } : null,
    allowedRate: allowed,
  };
}
