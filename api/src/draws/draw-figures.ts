import { applyObjections, computeDraw, firstState, type ComputedDraw, type DrawInput, type DrawLine } from '@tallypole/shared/draw';
import { whoPays, type WhoPays } from '@tallypole/shared/funding';
import { atLeastZero, minus, sum } from '@tallypole/shared/money';
import { canonicalHash, type Json } from '../common/canonical.ts';
import type { BasisFacts, BasisLoan, DrawBasis, DrawFacts } from './draw-facts.ts';

const WHOLE = 10_000;

export interface DrawFigures {
  computed: ComputedDraw & { steps: NonNullable<ComputedDraw['steps']> };
  who: WhoPays;
  /** The homeowner's and the loan's part; together they are what is due. */
  homeownerCents: number;
  loanCents: number;
  effectHash: string;
}

/** What the draw rests on now: the frozen basis once it is approved, else the schedule, the contract and the objections of today. */
export function basisOf(facts: BasisFacts): DrawBasis {
  return facts.draw.basis ?? { v: 1, ...currentDraw(facts), milestones: facts.milestones, loan: currentLoan(facts) };
}

/** Lines as they are asked for, before any objection. */
export function askedLines({ lines, previous }: Pick<DrawFacts, 'lines' | 'previous'>): DrawLine[] {
  const before = new Map(previous?.basis.draw.lines.map((line) => [line.id, line]));
  return lines.map(({ id, description, scheduledCents, workCents, onHandCents }) => {
    const approvedWorkCents = before.get(id)?.workCents ?? 0;
    const approvedOnHandCents = before.get(id)?.onHandCents ?? 0;
    return { id, description, scheduledCents, workCents: workCents ?? approvedWorkCents, onHandCents: onHandCents ?? approvedOnHandCents, approvedWorkCents, approvedOnHandCents };
  });
}

function currentDraw(facts: BasisFacts): Pick<DrawBasis, 'draw' | 'lines' | 'ownBeforeCents'> {
  const { job, previous, objections } = facts;
  const asked = askedLines(facts);
  const before = previous && computeDraw(previous.basis.draw, { steps: false });
  const draw: DrawInput = {
    style: job.style,
    contractSumAsSignedCents: job.contractSumCents,
    changesApprovedCents: job.changesApprovedCents,
    lines: applyObjections(asked, objections.map(({ lineId, objectedCents, reason }) => ({ lineId, cents: objectedCents, reason }))),
    retainage: { workRate: job.retainageRate, materialsRate: job.retainageRate },
    release: { at: 'none' },
    deposit: { depositCents: job.depositReceivedCents, use: 'proportional' },
    withheldCents: 0,
    before: before?.after ?? firstState,
    throughOn: facts.draw.throughOn,
    isFinal: false,
  };
  const lines = facts.lines.map(({ id, number, phase, description, kind, milestoneId }) => ({ id, number, phase, description, kind, milestoneId }));
  return { draw, lines, ownBeforeCents: before && previous ? ownLinesNet(previous.basis, before) : 0 };
}

function currentLoan({ loan, previous }: BasisFacts): BasisLoan | null {
  if (!loan) return null;
  const fundedBeforeCents = previous?.loanCentsToDate ?? 0;
  const { lenderName, holdbackRate, shortfall, constructionCents, equityFirstCents } = loan;
  const earlier = previous?.basis.loan ? minus(previous.basis.loan.equityRemainingCents, figuresOf(previous.basis, null).who.equityCents) : null;
  return { lenderName, holdbackRate, shortfall, fundedBeforeCents, undisbursedCents: atLeastZero(minus(constructionCents, fundedBeforeCents)), equityRemainingCents: earlier ?? equityFirstCents };
}

/** Lines of changes are the homeowner's own until the lender takes them into its budget. */
function ownLinesNet(basis: DrawBasis, computed: ComputedDraw): number {
  const changes = new Set(basis.lines.filter(({ kind }) => kind === 'change').map(({ id }) => id));
  return sum(computed.lines.filter(({ id }) => changes.has(id)).map(({ billedCents, retainageCents }) => minus(billedCents, retainageCents)));
}

/**
 * The figures of a draw and who pays them. Pure: every page, mail and act computes from the same basis, so all show the same cents. Until
 * the lender has said how far it takes the work to be, what is approved is presumed. Throws InvalidInput.
 */
export function figuresOf(basis: DrawBasis, allowed: DrawFacts['allowed']): DrawFigures {
  const computed = computeDraw(basis.draw);
  const { steps, summary } = computed;
  if (!steps) throw new Error('The draw was computed without its arithmetic.');
  const { loan } = basis;
  const who = whoPays({
    dueNowCents: summary.dueNowCents,
    ownLines: loan ? { toDateCents: ownLinesNet(basis, computed), beforeCents: basis.ownBeforeCents } : { toDateCents: 0, beforeCents: 0 },
    equity: { mode: 'first', remainingCents: loan?.equityRemainingCents ?? 0 },
    loan: loan && { undisbursedCents: loan.undisbursedCents, fundedBeforeCents: loan.fundedBeforeCents, holdbackRate: loan.holdbackRate, budget: budgetOf(basis, computed, allowed) },
    unfunded: loan?.shortfall === 'carried' ? 'carried' : 'homeowner_now',
  });
  const homeownerCents = who.homeownerNowCents;
  const loanCents = minus(summary.dueNowCents, homeownerCents);
  return { computed: { ...computed, steps }, who, homeownerCents, loanCents, effectHash: canonicalHash(effectOf(basis, computed, { homeownerCents, loanCents })) };
}

/** The lender's budget has a line for each line of the signed schedule. */
function budgetOf(basis: DrawBasis, computed: ComputedDraw, allowed: DrawFacts['allowed']) {
  const rates = new Map(allowed?.map(({ lineId, percent }) => [lineId, percent]));
  return basis.lines.flatMap(({ id, description, kind }, i) => {
    const line = computed.lines[i];
    const input = basis.draw.lines[i];
    if (kind === 'change' || !line || !input || line.billedCents === 0) return [];
    return [{ id, name: description, budgetCents: input.scheduledCents, approvedNetCents: minus(line.billedCents, line.retainageCents), allowedRate: rates.get(id) ?? WHOLE }];
  });
}

/** What approving does: the sums that are approved, line by line, and who pays them. */
function effectOf(basis: DrawBasis, computed: ComputedDraw, who: { homeownerCents: number; loanCents: number }): Json {
  const { throughOn } = basis.draw;
  const lines = computed.lines.map(({ id, billedCents, thisDrawCents }) => ({ id, billedCents, thisDrawCents }));
  return { throughOn, lines, summary: { ...computed.summary }, ...who };
}
