import type { Step } from '../arithmetic/index.ts';
import type { DepositTerms, DrawState, RetainageTerms } from '../draw/index.ts';
import type { BusinessDate, DueTerms } from '../due/index.ts';
import type { Equity } from '../funding/index.ts';
import type { BasisPoints, Cents } from '../money/index.ts';

/** A month as YYYY-MM. */
export type Month = string;

/** When what is left on a line is billed: whole when its milestone is forecast to finish, or evenly by elapsed days (supervision, general lines). */
export type Expected = { on: BusinessDate; milestone?: { id: string; name: string } } | { from: BusinessDate; to: BusinessDate };

/** A line of the schedule of values with what approved draws billed on it, to date. */
export interface AheadLine {
  id: string;
  description: string;
  /** What it will come to; on a cost-plus job the estimate at completion. A deducting change's line is negative. */
  scheduledCents: Cents;
  workCents: Cents;
  /** Materials stored and not built in yet. */
  onHandCents: Cents;
  /** Nothing is retained on it. */
  exempt?: boolean;
  /** The lender's budget line; null or left out: the homeowner alone funds it, as with changes that the lender didn't take. Without a loan it doesn't matter. */
  budgetLineId?: string | null;
  expected: Expected;
}

export interface AheadLoan {
  /** For construction: without interest reserve, land and fees. */
  constructionCents: Cents;
  /** Its parts of all approved draws, paid or not. */
  fundedCents: Cents;
  holdbackRate: BasisPoints;
  /** What is left of it after the approved draws. */
  equity: Equity;
  budget: readonly { id: string; name: string; budgetCents: Cents }[];
  unfunded: 'homeowner_now' | 'carried';
}

/** An approved draw with what is still open on it, split when it was approved. */
export interface UnpaidDraw {
  id: string;
  label: string;
  dueOn: BusinessDate;
  homeownerCents: Cents;
  loanCents: Cents;
}

/** A change that is issued and not signed yet. */
export interface IssuedChange {
  id: string;
  label: string;
  /** Its price; a credit is negative. */
  cents: Cents;
  expectedOn: BusinessDate;
  exempt?: boolean;
}

export interface CashAheadInput {
  /** Today, as the caller has it: nothing falls before its month. */
  asOf: BusinessDate;
  /** All lines, also those billed in full; together they are the contract sum today. */
  lines: readonly AheadLine[];
  retainage: RetainageTerms;
  /** In which months it is paid out: down to a share at substantial completion, where the contract says so, and the rest. */
  release: { substantial?: { month: Month; keepRate: BasisPoints }; finalMonth: Month };
  deposit: DepositTerms;
  /** What the approved draws left behind. */
  before: DrawState;
  /** Calendar days from a milestone's finish to the start of the payment clock. */
  reviewDays: number;
  due: DueTerms;
  loan: AheadLoan | null;
  unpaid: readonly UnpaidDraw[];
  issued: readonly IssuedChange[];
}

export interface CashMonth {
  month: Month;
  /** Lines the homeowner funds alone, and equity; everything where there is no loan. Negative only in the last month, where a credit is left over. */
  homeownerCents: Cents;
  loanCents: Cents;
  /** What nobody funds yet: the homeowner's cash in this month, unless the contract carries it. */
  notFundedCents: Cents;
  totalCents: Cents;
  /** All months so far. */
  runningCents: Cents;
  /** Not funded, and carried to the next month by the contract: not in this month's total. */
  carriedCents: Cents;
  /** The band on top: issued changes, should they be signed. In no other figure. */
  issuedCents: Cents;
  /** The running total with the band. */
  runningWithIssuedCents: Cents;
  steps: Step;
}

export interface CashAhead {
  /** Without gaps, from today's month to the last one in which anything falls due. */
  months: CashMonth[];
  /** Contract sum today − earned to date: retainage held is in it. */
  leftToBillCents: Cents;
  approvedUnpaidCents: Cents;
  depositLeftCents: Cents;
  /** Earned, held back for a dispute, and presumed to be let go with the last retainage. */
  withheldCents: Cents;
  /** Carried from the last draw in the homeowner's favor. */
  creditCents: Cents;
  /** Left to bill + approved and unpaid + withheld − deposit not yet used − credit: to the cent what the months add up to. */
  totalCents: Cents;
  issuedCents: Cents;
  steps: Step;
}
