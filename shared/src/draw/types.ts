import type { Step } from '../arithmetic/index.ts';
import type { BasisPoints, Cents } from '../money/index.ts';

export type ContractStyle = 'percent_complete' | 'milestone_sums' | 'cost_plus';

/** One line of the schedule of values in a draw; all amounts are to date, in cents. */
export interface DrawLine {
  id: string;
  description: string;
  /** Changes and value moved from other lines included. */
  scheduledCents: Cents;
  workCents: Cents;
  /** Materials stored and not built in yet: a balance, not an increment. */
  onHandCents: Cents;
  approvedWorkCents: Cents;
  approvedOnHandCents: Cents;
  /** A line that nothing is retained on. */
  exempt?: boolean;
  /** Less than was approved before is an error unless it is said to be a correction. */
  correction?: boolean;
}

export interface RetainageStep {
  /** S reaches this share of the contract sum today. */
  thresholdRate: BasisPoints;
  rate: BasisPoints;
  /** The lower rate on what comes after, or on everything. */
  on: 'further_work' | 'all_work';
}

/** What is kept back, on cumulative figures. No step, cap or reserve: a plain rate. */
export interface RetainageTerms {
  workRate: BasisPoints;
  materialsRate: BasisPoints;
  step?: RetainageStep;
  /** At most this share of the contract sum today. */
  capRate?: BasisPoints;
  /** At least this share of what is billed, until the reserve may be let go. */
  reserveRate?: BasisPoints;
}

/** At substantial completion what is held falls; with the final draw it is let go. */
export type RetainageRelease =
  | { at: 'none' }
  | { at: 'substantial_completion'; punchListCents: Cents; multipleRate: number }
  | { at: 'substantial_completion'; keepRate: BasisPoints }
  | { at: 'final' };

export interface DepositTerms {
  depositCents: Cents;
  /** In proportion to what is billed, or used up first. */
  use: 'proportional' | 'first';
}

/** What earlier approved draws left behind; handed from draw to draw. */
export interface DrawState {
  earnedCents: Cents;
  retainageHeldCents: Cents;
  depositUsedCents: Cents;
  withheldCents: Cents;
  /** A negative due of the draw before, as a positive amount. */
  creditCents: Cents;
  /** The threshold of the retainage step, once it was reached. */
  latchedCents: Cents | null;
  /** YYYY-MM-DD */
  throughOn: string | null;
}

export const firstState: DrawState = { earnedCents: 0, retainageHeldCents: 0, depositUsedCents: 0, withheldCents: 0, creditCents: 0, latchedCents: null, throughOn: null };

export interface DrawInput {
  style: ContractStyle;
  contractSumAsSignedCents: Cents;
  changesApprovedCents: Cents;
  lines: readonly DrawLine[];
  retainage: RetainageTerms;
  release: RetainageRelease;
  deposit: DepositTerms;
  /** All open withholdings to date. */
  withheldCents: Cents;
  before: DrawState;
  throughOn: string;
  isFinal: boolean;
  /** The reserve may be let go: so many days after completion have passed. */
  reserveOver?: boolean;
}

export interface ComputedLine {
  id: string;
  billedCents: Cents;
  thisDrawCents: Cents;
  leftCents: Cents;
  /** Work and billing in basis points of the scheduled value; 0 for a line of 0. */
  workRate: BasisPoints;
  billedRate: BasisPoints;
  retainageCents: Cents;
}

export interface DrawSummary {
  contractSumAsSignedCents: Cents;
  changesApprovedCents: Cents;
  contractSumTodayCents: Cents;
  workInPlaceCents: Cents;
  materialsOnHandCents: Cents;
  retainageHeldCents: Cents;
  earnedToDateCents: Cents;
  billedBeforeCents: Cents;
  withheldCents: Cents;
  depositUsedToDateCents: Cents;
  depositUsedNowCents: Cents;
  creditBeforeCents: Cents;
  dueNowCents: Cents;
  creditCarriedCents: Cents;
  leftToBillCents: Cents;
}

export interface ComputedDraw {
  lines: ComputedLine[];
  summary: DrawSummary;
  after: DrawState;
  steps: Readonly<Record<'contractSumToday' | 'retainageHeld' | 'earnedToDate' | 'dueNow' | 'leftToBill', Step>> | null;
}
