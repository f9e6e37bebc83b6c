import { given, money, must, rate, step, type Step } from '../arithmetic/index.ts';
import { atLeastZero, basisPoints, cents, divideRounded, minus, percentOf, sum, type BasisPoints, type Cents } from '../money/index.ts';

/** One line of the lender's budget with what is asked for and allowed on it, to date. */
export interface BudgetPosition {
  id: string;
  name: string;
  budgetCents: Cents;
  /** Approved on the builder's lines mapped here, net of retainage, to date. */
  approvedNetCents: Cents;
  /** How far the lender takes the work to be. */
  allowedRate: BasisPoints;
}

export type Equity = { mode: 'first'; remainingCents: Cents } | { mode: 'proportion'; rate: BasisPoints };

export interface WhoPaysInput {
  dueNowCents: Cents;
  /** Net of the lines that the homeowner alone funds: changes the lender didn't take. */
  ownLines: { toDateCents: Cents; beforeCents: Cents };
  equity: Equity;
  loan: { undisbursedCents: Cents; fundedBeforeCents: Cents; holdbackRate: BasisPoints; budget: readonly BudgetPosition[] } | null;
  /** What nobody funds yet is the homeowner's cash now, or carried, as the contract says. */
  unfunded: 'homeowner_now' | 'carried';
}

export interface WhoPays {
  ownLinesCents: Cents;
  equityCents: Cents;
  loanCents: Cents;
  notFundedCents: Cents;
  /** Own lines, equity, and what isn't funded yet where the contract asks for it now. */
  homeownerNowCents: Cents;
  steps: Readonly<Record<'homeowner' | 'loan', Step>>;
}

/** Where the money of a draw comes from; the parts add up to what is due. Throws InvalidInput. */
export function whoPays(input: WhoPaysInput): WhoPays {
  const { dueNowCents: due, ownLines, equity, loan } = input;
  must(cents(due, 'dueNowCents') >= 0, 'dueNowCents', due, 'must not be negative');
  const ownLinesCents = clamp(minus(cents(ownLines.toDateCents, 'ownLines.toDateCents'), cents(ownLines.beforeCents, 'ownLines.beforeCents')), due);
  const afterOwn = minus(due, ownLinesCents);
  const equityCents = equityPart(equity, afterOwn);
  const afterEquity = minus(afterOwn, equityCents);
  const offer = loan === null ? null : loanOffer(loan);
  const loanCents = clamp(offer?.cents ?? 0, afterEquity);
  const notFundedCents = minus(afterEquity, loanCents);
  const homeownerNowCents = sum([ownLinesCents, equityCents, input.unfunded === 'homeowner_now' ? notFundedCents : 0]);
  const loanStep = step('The loan', 'what the lender allows, at most what is undisbursed and what is left of the draw', money(loanCents), [...(offer ? [offer.step] : []), given('left of the draw', money(afterEquity))]);
  const homeowner = step('The homeowner', 'own lines + equity + what is not funded yet', money(homeownerNowCents), [
    given('Lines the homeowner funds alone', money(ownLinesCents)),
    step('Equity', equity.mode === 'first' ? 'used first, until it is used up' : 'a fixed proportion', money(equityCents), [equity.mode === 'first' ? given('left of it', money(equity.remainingCents)) : given('proportion', rate(equity.rate))]),
    step('Not funded yet', 'due now − own lines − equity − the loan', money(notFundedCents), [given('Due now', money(due)), loanStep]),
  ]);
  return { ownLinesCents, equityCents, loanCents, notFundedCents, homeownerNowCents, steps: { homeowner, loan: loanStep } };
}

const clamp = (amount: Cents, most: Cents): Cents => Math.min(atLeastZero(amount), most);

function equityPart(equity: Equity, most: Cents): Cents {
  if (equity.mode === 'proportion') return clamp(percentOf(most, basisPoints(equity.rate, 'equity.rate')), most);
  must(cents(equity.remainingCents, 'equity.remainingCents') >= 0, 'equity.remainingCents', equity.remainingCents, 'must not be negative');
  return clamp(equity.remainingCents, most);
}

function loanOffer(loan: NonNullable<WhoPaysInput['loan']>): { cents: Cents; step: Step } {
  const keep = 10_000 - basisPoints(loan.holdbackRate, 'loan.holdbackRate');
  for (const name of ['undisbursedCents', 'fundedBeforeCents'] as const) must(cents(loan[name], `loan.${name}`) >= 0, `loan.${name}`, loan[name], 'must not be negative');
  const lines = loan.budget.map((position, i) => {
    const allowed = basisPoints(position.allowedRate, `loan.budget.${i}.allowedRate`);
    must(cents(position.budgetCents, `loan.budget.${i}.budgetCents`) >= 0, `loan.budget.${i}.budgetCents`, position.budgetCents, 'must not be negative');
    const ceiling = divideRounded(BigInt(position.budgetCents) * BigInt(allowed) * BigInt(keep), 100_000_000n);
    const taken = Math.min(cents(position.approvedNetCents, `loan.budget.${i}.approvedNetCents`), ceiling);
    return { taken, step: step(position.name, 'the lesser of what is approved and what the lender allows of its line, less its holdback', money(taken), [given('approved, net', money(position.approvedNetCents)), given('budget', money(position.budgetCents)), given('allowed', rate(allowed)), given('holdback', rate(loan.holdbackRate))]) };
  });
  const offered = minus(sum(lines.map(({ taken }) => taken)), loan.fundedBeforeCents);
  const total = clamp(offered, loan.undisbursedCents);
  return {
    cents: total,
    step: step('What the lender allows', 'sum over its budget lines − funded before, at most what is undisbursed', money(total), [...lines.map((line) => line.step), given('funded before', money(loan.fundedBeforeCents)), given('undisbursed', money(loan.undisbursedCents))]),
  };
}
