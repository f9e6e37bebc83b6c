import { given, money, rate, step, type Step } from '../arithmetic/index.ts';
import { minus, sum, type BasisPoints, type Cents } from '../money/index.ts';

export interface LineFigures {
  id: string;
  description: string;
  scheduledCents: Cents;
  workCents: Cents;
  onHandCents: Cents;
  billedBeforeCents: Cents;
  billedRate: BasisPoints;
}

/** What one line asks for in a draw: work in place + materials on hand, less what was billed before. Throws InvalidInput. */
export function lineSteps(line: LineFigures): Step {
  const billed = sum([line.workCents, line.onHandCents]);
  const origin = { record: 'line', id: line.id, label: line.description } as const;
  return step('In this draw', 'billed to date − billed before', money(minus(billed, line.billedBeforeCents)), [
    step('Billed to date', 'work in place + materials on hand', money(billed), [given('Work in place', money(line.workCents)), given('Materials on hand', money(line.onHandCents))]),
    given('Billed before', money(line.billedBeforeCents)),
    given('Scheduled value', money(line.scheduledCents), origin),
    given('Billed of it', rate(line.billedRate)),
  ]);
}

export interface RowFigures {
  id: string;
  number: number;
  homeownerCents: Cents;
  loanCents: Cents;
  paidHomeownerCents: Cents;
  paidLoanCents: Cents;
  openHomeownerCents: Cents;
  openLoanCents: Cents;
}

/** What is paid and what is open of a draw, from both sides. Throws InvalidInput. */
export function rowSteps(row: RowFigures): Record<'due' | 'paid' | 'open', Step> {
  const origin = { record: 'draw', id: row.id, label: `Draw ${row.number}` } as const;
  const due = step('Due', 'the homeowner’s part + the loan’s part', money(sum([row.homeownerCents, row.loanCents])), [given('Homeowner', money(row.homeownerCents), origin), given('Loan', money(row.loanCents), origin)]);
  const paid = step('Paid', 'from the homeowner + from the loan, less what went back', money(sum([row.paidHomeownerCents, row.paidLoanCents])), [given('Homeowner', money(row.paidHomeownerCents), origin), given('Loan', money(row.paidLoanCents), origin)]);
  const open = step('Open', 'open from the homeowner + open from the loan', money(sum([row.openHomeownerCents, row.openLoanCents])), [given('Homeowner', money(row.openHomeownerCents), origin), given('Loan', money(row.openLoanCents), origin)]);
  return { due, paid, open };
}
