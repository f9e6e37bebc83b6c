import { given, money, must, rate, step, type Step } from '../arithmetic/index.ts';
import { atLeastZero, basisPoints, cents, minus, percentExact, percentOf, sum, type BasisPoints, type Cents } from '../money/index.ts';

export interface AllowanceInput {
  allowanceCents: Cents;
  selectedCostCents: Cents;
  /** Agreed on an excess only. */
  markupRate: BasisPoints;
}

export interface AllowanceSettlement {
  differenceCents: Cents;
  markupCents: Cents;
  priceCents: Cents;
  steps: Step;
}

/** Settles an allowance: selected cost − allowance, with the agreed mark-up on an excess, and a plain credit below. Throws InvalidInput. */
export function settleAllowance({ allowanceCents, selectedCostCents, markupRate }: AllowanceInput): AllowanceSettlement {
  must(cents(allowanceCents, 'allowanceCents') >= 0, 'allowanceCents', allowanceCents, 'must not be negative');
  must(cents(selectedCostCents, 'selectedCostCents') >= 0, 'selectedCostCents', selectedCostCents, 'must not be negative');
  const differenceCents = minus(selectedCostCents, allowanceCents);
  const excess = atLeastZero(differenceCents);
  const markupCents = percentOf(excess, basisPoints(markupRate, 'markupRate'));
  const priceCents = sum([differenceCents, markupCents]);
  const difference = step('Difference', 'selected cost − allowance', money(differenceCents), [given('selected cost', money(selectedCostCents)), given('allowance', money(allowanceCents))]);
  const markup = step('Mark-up', 'rate × the excess, to the cent; none on a credit', money(markupCents), [given('excess', money(excess)), given('rate', rate(markupRate))], percentExact(excess, markupRate));
  return { differenceCents, markupCents, priceCents, steps: step('Settlement', 'difference + mark-up', money(priceCents), [difference, markup]) };
}

export interface CostPlusInput {
  costToDateCents: Cents;
  feeToDateCents: Cents;
  ceilingCents: Cents;
  /** The builder's share of what is saved below the ceiling, paid when all cost is known. */
  savingsShareRate: BasisPoints;
  complete: boolean;
}

/** Cost-plus with a ceiling: billed = min(cost + fee, ceiling); on completion the builder's share of the savings is added. Throws InvalidInput. */
export function billCostPlus(input: CostPlusInput): { billedCents: Cents; savingsCents: Cents; savingsShareCents: Cents; steps: Step } {
  const { costToDateCents, feeToDateCents, ceilingCents, savingsShareRate, complete } = input;
  for (const field of ['costToDateCents', 'feeToDateCents', 'ceilingCents'] as const) must(cents(input[field], field) >= 0, field, input[field], 'must not be negative');
  const spent = sum([costToDateCents, feeToDateCents]);
  const savingsCents = complete ? atLeastZero(minus(ceilingCents, spent)) : 0;
  const savingsShareCents = percentOf(savingsCents, basisPoints(savingsShareRate, 'savingsShareRate'));
  const billedCents = sum([Math.min(spent, ceilingCents), savingsShareCents]);
  const upTo = step('Cost and fee', 'cost + fee, at most the ceiling', money(Math.min(spent, ceilingCents)), [given('cost to date', money(costToDateCents)), given('fee to date', money(feeToDateCents)), given('ceiling', money(ceilingCents))]);
  const share = step('Share of the savings', 'rate × what was saved, to the cent', money(savingsShareCents), [given('saved', money(savingsCents)), given('rate', rate(savingsShareRate))]);
  return { billedCents, savingsCents, savingsShareCents, steps: step('Billed', 'cost and fee + share of the savings', money(billedCents), [upTo, share]) };
}
