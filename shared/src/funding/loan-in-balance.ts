import { given, money, must, step, type Step } from '../arithmetic/index.ts';
import { atLeastZero, cents, minus, sum, type Cents } from '../money/index.ts';

export interface InBalanceInput {
  contractSumTodayCents: Cents;
  paidToDateCents: Cents;
  /** Signed directives under their not-to-exceed sums that aren't priced in yet. */
  openDirectivesCents: Cents;
  /** For construction: without interest reserve, land and fees. */
  undisbursedCents: Cents;
  equityCommittedCents: Cents;
  /** Outside the contract. */
  contingencyCents: Cents;
}

export interface InBalance {
  needCents: Cents;
  sourcesCents: Cents;
  shortfallCents: Cents;
  inBalance: boolean;
  steps: Step;
}

/** Whether what is left to pay is covered by what is left to pay it from. For the whole job or for one budget line. Throws InvalidInput. */
export function loanInBalance(input: InBalanceInput): InBalance {
  for (const [name, value] of Object.entries(input) as [keyof InBalanceInput, Cents][]) must(cents(value, name) >= 0, name, value, 'must not be negative');
  const needCents = sum([minus(input.contractSumTodayCents, input.paidToDateCents), input.openDirectivesCents]);
  const sourcesCents = sum([input.undisbursedCents, input.equityCommittedCents, input.contingencyCents]);
  const shortfallCents = atLeastZero(minus(needCents, sourcesCents));
  const need = step('Needed', 'contract sum today − paid + open directives', money(needCents), [
    given('Contract sum today', money(input.contractSumTodayCents)),
    given('Paid to date', money(input.paidToDateCents)),
    given('Open directives', money(input.openDirectivesCents)),
  ]);
  const sources = step('Sources', 'undisbursed + equity + contingency', money(sourcesCents), [
    given('Undisbursed for construction', money(input.undisbursedCents)),
    given('Equity still committed', money(input.equityCommittedCents)),
    given('Contingency outside the contract', money(input.contingencyCents)),
  ]);
  return { needCents, sourcesCents, shortfallCents, inBalance: shortfallCents === 0, steps: step('Shortfall', 'needed − sources, at least 0', money(shortfallCents), [need, sources]) };
}
