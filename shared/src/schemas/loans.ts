import { z } from 'zod';
import { Id, Line, NonNegativeCents, PositiveCents, Rate, Version } from './common.ts';

export const fundingRoutes = ['builder', 'borrower', 'joint_check', 'title_company'] as const;

/** A construction loan's terms; sums in cents, rates in basis points. */
const Terms = z.strictObject({
  id: Id,
  lenderName: Line(120, 2),
  amountCents: PositiveCents,
  /** What of it is for construction: without interest reserve, land and fees. */
  constructionCents: PositiveCents,
  /** What the homeowner puts in before the loan is drawn on. */
  equityFirstCents: NonNegativeCents,
  /** Share that the lender keeps back of each line. */
  holdbackRate: Rate,
  /** A change above this sum needs the lender's consent. */
  consentLimitCents: NonNegativeCents,
  /** Who carries what the loan doesn't pay in a draw: the homeowner at once, or the next draw. */
  shortfall: z.enum(['homeowner', 'carried']),
  /** Whom the lender sends the money to. */
  route: z.enum(fundingRoutes),
});
const withinAmount = (loan: { constructionCents: number; amountCents: number }) => loan.constructionCents <= loan.amountCents;

const rule = { path: ['constructionCents'], message: 'The part for construction must not be more than the loan.' };

export const SetLoan = Terms.refine(withinAmount, rule);
/** The same as a form holds it, whose id is made beside it. */
export const LoanTerms = Terms.omit({ id: true }).refine(withinAmount, rule);
export const Loan = Terms.extend({ version: Version, disbursedCents: z.int() });
/** The job's loan, or that there is none. */
export const JobLoan = z.object({ loan: Loan.nullable() });

export type SetLoan = z.infer<typeof SetLoan>;
export type Loan = z.infer<typeof Loan>;
export type JobLoan = z.infer<typeof JobLoan>;
export type FundingRoute = (typeof fundingRoutes)[number];
