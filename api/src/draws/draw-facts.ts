import type { DrawInput } from '@tallypole/shared/draw';
import type { ReviewState, DrawState } from '@tallypole/shared/schemas/draw-states';
import type { MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { Payment } from '@tallypole/shared/schemas/payments';

/** A line as it stood, beside its figures, so that an approved draw needs nothing else to be shown. */
interface BasisLine {
  id: string;
  number: string;
  phase: string;
  description: string;
  kind: 'base' | 'allowance' | 'contingency' | 'change';
  milestoneId: string | null;
}

interface BasisMilestone {
  id: string;
  name: string;
  state: MilestoneState;
  percent: number;
  provenOn: string | null;
}

export interface BasisLoan {
  lenderName: string;
  holdbackRate: number;
  shortfall: 'homeowner' | 'carried';
  /** What is left to draw of the part for construction. */
  undisbursedCents: number;
  /** The loan's part of earlier draws. */
  fundedBeforeCents: number;
  equityRemainingCents: number;
}

/**
 * Everything that a draw's figures follow from: stored when it is sent and when it is approved. `draw` has the lines as they would be
 * approved, objections taken off; `ownBeforeCents` is what the lines that the homeowner funds alone came to before.
 */
export interface DrawBasis {
  v: 1;
  draw: DrawInput;
  lines: BasisLine[];
  milestones: BasisMilestone[];
  ownBeforeCents: number;
  loan: BasisLoan | null;
}

interface ObjectionFacts {
  id: string;
  lineId: string;
  objectedCents: number;
  reason: string;
  by: string;
}

/** One draw with what it rests on, as read in one statement. */
export interface DrawFacts {
  job: {
    id: string;
    firmId: string;
    name: string;
    firmName: string;
    timeZone: string;
    style: DrawInput['style'];
    contractSumCents: number;
    changesApprovedCents: number;
    retainageRate: number;
    depositReceivedCents: number;
    startOn: string;
    completeBy: string;
    reviewDays: number;
    paymentDays: number;
    homeownersSign: 'one' | 'all';
  };
  draw: {
    id: string;
    number: number;
    state: DrawState;
    reviewState: ReviewState;
    throughOn: string;
    note: string;
    returnReason: string | null;
    basis: DrawBasis | null;
    effectHash: string | null;
    submittedAt: string | null;
    approvedAt: string | null;
    dueOn: string | null;
    dueCents: number | null;
    homeownerCents: number | null;
    loanCents: number | null;
    version: number;
    paidHomeownerCents: number;
    paidLoanCents: number;
  };
  /** The schedule today, with this draw's entries; null where it has none for the line. */
  lines: (BasisLine & { scheduledCents: number; workCents: number | null; onHandCents: number | null })[];
  milestones: BasisMilestone[];
  /** The last approved draw before this one, and what all of them asked of the loan. */
  previous: { basis: DrawBasis; loanCentsToDate: number } | null;
  loan: { lenderName: string; constructionCents: number; equityFirstCents: number; holdbackRate: number; shortfall: 'homeowner' | 'carried' } | null;
  objections: ObjectionFacts[];
  /** The lender's latest word per line; null before it has spoken. */
  allowed: { lineId: string; percent: number }[] | null;
  homeowners: { id: string; name: string }[];
  invitedHomeowners: number;
  approvals: { id: string; name: string; at: string; effectHash: string }[];
  photos: { id: string; milestoneId: string; note: string; takenAt: string | null }[];
  reviews: { step: 'inspected' | 'allowed'; onDate: string; note: string; conditions: string; by: string; at: string }[];
  fundings: { amountCents: number; fundedOn: string; reference: string; by: string; received: boolean }[];
  payments: Payment[];
}

/** The part of a draw's facts that its figures follow from. */
export interface BasisFacts extends Pick<DrawFacts, 'lines' | 'milestones' | 'previous' | 'loan' | 'objections'> {
  job: Pick<DrawFacts['job'], 'style' | 'contractSumCents' | 'changesApprovedCents' | 'retainageRate' | 'depositReceivedCents' | 'startOn' | 'completeBy'>;
  draw: Pick<DrawFacts['draw'], 'basis' | 'throughOn'>;
}
