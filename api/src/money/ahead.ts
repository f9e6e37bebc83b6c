import { computeDraw, firstState } from '@tallypole/shared/draw';
import type { CashAheadInput, Expected, UnpaidDraw } from '@tallypole/shared/forecast';
import type { DrawRow } from '@tallypole/shared/schemas/draws';
import { basisOf } from '../draws/draw-figures.ts';
import { completionDate } from '../jobs/completion-date.ts';
import type { AheadFacts } from './ahead.repository.ts';

const PAYABLE = new Set<DrawRow['state']>(['approved', 'part_paid']);

/** What the months ahead follow from: schedule and contract, the last approved draw, what is open, the loan, and the days milestones are expected. Pure. */
export function aheadInput(facts: AheadFacts, draws: readonly DrawRow[], asOf: string): CashAheadInput {
  const { next, expected, reviewDays, paymentDays } = facts;
  const { job, previous, loan } = next;
  const completion = completionDate({ completeBy: job.completeBy, dayKind: facts.dayKind }, facts.daysApproved);
  const last = expected.reduce((latest, { on }) => (on !== null && on > latest ? on : latest), completion > asOf ? completion : asOf);
  const milestones = new Map(expected.map(({ id, name, on }) => [id, { on: on ?? last, milestone: { id, name } }]));
  const billed = new Map(previous?.basis.draw.lines.map((line) => [line.id, line]));
  const rest = basisOf({ ...next, draw: { basis: null, throughOn: previous?.basis.draw.throughOn ?? asOf }, objections: [] }).loan;
  return {
    asOf,
    lines: next.lines.map(({ id, description, kind, milestoneId, scheduledCents }) => ({
      id,
      description,
      scheduledCents,
      workCents: billed.get(id)?.workCents ?? 0,
      onHandCents: billed.get(id)?.onHandCents ?? 0,
      budgetLineId: kind === 'change' ? null : id,
      // a contingency waits for the end, supervision and the like go with time
      expected: (milestoneId === null ? undefined : milestones.get(milestoneId)) ?? (kind === 'contingency' ? { on: last } : ({ from: asOf, to: last } satisfies Expected)),
    })),
    retainage: { workRate: job.retainageRate, materialsRate: job.retainageRate },
    release: { finalMonth: last.slice(0, 7) },
    deposit: { depositCents: job.depositReceivedCents, use: 'proportional' },
    before: previous ? computeDraw(previous.basis.draw, { steps: false }).after : firstState,
    reviewDays,
    due: { startsAt: 'approval', days: paymentDays, dayKind: 'calendar', moveToBusinessDay: true, calendar: 'bank' },
    loan: loan && rest && {
      constructionCents: loan.constructionCents,
      fundedCents: rest.fundedBeforeCents,
      holdbackRate: loan.holdbackRate,
      equity: { mode: 'first', remainingCents: rest.equityRemainingCents },
      budget: next.lines.filter(({ kind }) => kind !== 'change').map(({ id, description, scheduledCents }) => ({ id, name: description, budgetCents: scheduledCents })),
      unfunded: loan.shortfall === 'carried' ? 'carried' : 'homeowner_now',
    },
    unpaid: draws.flatMap(({ id, number, state, dueOn, openHomeownerCents, openLoanCents }): UnpaidDraw[] =>
      PAYABLE.has(state) && dueOn !== null ? [{ id, label: `Draw ${number}`, dueOn, homeownerCents: openHomeownerCents, loanCents: openLoanCents }] : [],
    ),
    issued: facts.issued.map(({ id, label, cents, milestoneId }) => ({ id, label, cents, expectedOn: (milestoneId === null ? undefined : milestones.get(milestoneId)?.on) ?? last })),
  };
}
