import { date, given, money, step, type Step } from '../arithmetic/index.ts';
import { minus, sum, type Cents } from '../money/index.ts';
import type { IssuedPart } from './issued.ts';
import type { MonthDraw } from './month-draws.ts';
import { monthName } from './months.ts';
import type { MonthPayers } from './payers.ts';
import type { CashAhead, CashMonth, Month, UnpaidDraw } from './types.ts';

export interface ExplainedMonth {
  month: Month;
  figures: Omit<CashMonth, 'steps' | 'month'>;
  draw: MonthDraw | null;
  /** Retainage held before the month. */
  heldBeforeCents: Cents;
  withheldBeforeCents: Cents;
  payers: MonthPayers | null;
  carriedInCents: Cents;
  unpaid: readonly UnpaidDraw[];
  issued: readonly IssuedPart[];
}

/** Where a month's total comes from, who pays it, and what is on top. */
export function monthStep(about: ExplainedMonth): Step {
  const { month, figures, unpaid, issued } = about;
  const open = unpaid.map(({ id, label, dueOn, homeownerCents, loanCents }) =>
    step(label, 'approved and not paid yet', money(sum([homeownerCents, loanCents])), [given('Due', date(dueOn)), given('The homeowner', money(homeownerCents)), given('The loan', money(loanCents))].map((input) => ({ ...input, origin: { record: 'draw', id, label } as const }))));
  const band = figures.issuedCents === 0 && issued.length === 0 ? [] : [step('On top, if signed', 'issued changes, not in the total', money(figures.issuedCents), issued.map(({ steps }) => steps))];
  const carried = figures.carriedCents === 0 ? [] : [given('Not funded yet, carried to the next month', money(-figures.carriedCents))];
  return step(`Falls due in ${monthName(month)}`, 'new in this month + approved and unpaid, less what is carried on', money(figures.totalCents), [...newStep(about), ...open, ...carried, ...payerSteps(about), ...band]);
}

function newStep({ draw, heldBeforeCents, withheldBeforeCents, carriedInCents }: ExplainedMonth): Step[] {
  if (!draw) return [];
  const { summary, steps } = draw.computed;
  const retained = minus(heldBeforeCents, summary.retainageHeldCents);
  const letGo = minus(withheldBeforeCents, summary.withheldCents);
  const inputs = draw.parts.map((part) => part.steps);
  if (retained !== 0) inputs.push(step(retained < 0 ? 'Retainage kept back' : 'Retainage let go', 'held before − held after this month', money(retained), [given('Held before', money(heldBeforeCents)), ...(steps ? [steps.retainageHeld] : [])]));
  if (letGo !== 0) inputs.push(given('Withheld, presumed to be let go', money(letGo)));
  if (summary.depositUsedNowCents !== 0) inputs.push(given('Deposit used', money(-summary.depositUsedNowCents)));
  if (summary.creditBeforeCents !== 0) inputs.push(given('Credit from before', money(-summary.creditBeforeCents)));
  if (summary.creditCarriedCents !== 0) inputs.push(given('Credit left over', money(summary.creditCarriedCents)));
  if (carriedInCents !== 0) inputs.push(given('Not funded before, carried here', money(carriedInCents)));
  return [step('New in this month', 'parts left to bill that fall due, less retainage, deposit and credits', money(sum([summary.dueNowCents, carriedInCents])), inputs)];
}

function payerSteps({ payers }: ExplainedMonth): Step[] {
  if (!payers) return [];
  if (!payers.who) return [given('The homeowner', money(payers.homeownerCents))];
  return [payers.who.steps.homeowner, payers.who.steps.loan];
}

/** What the months add up to. */
export function totalStep(ahead: Omit<CashAhead, 'steps'>): Step {
  const { months, leftToBillCents, approvedUnpaidCents, withheldCents, depositLeftCents, creditCents, totalCents } = ahead;
  return step('Cash ahead', 'left to bill + approved and unpaid + withheld − deposit not yet used − credit; the months add up to it', money(totalCents), [
    given('Left to bill', money(leftToBillCents)),
    given('Approved and unpaid', money(approvedUnpaidCents)),
    ...(withheldCents === 0 ? [] : [given('Withheld', money(withheldCents))]),
    given('Deposit not yet used', money(depositLeftCents)),
    ...(creditCents === 0 ? [] : [given('Credit from the last draw', money(creditCents))]),
    ...months.map(({ steps }) => steps),
  ]);
}
