import { z } from 'zod';
import { BusinessDate } from './common.ts';
import { DrawRow } from './draws.ts';
import { Payment } from './payments.ts';
import { Step } from './steps.ts';

const figure = z.object({ cents: z.int(), step: Step });

/** The money of a job, from its ledger; every figure with its arithmetic. */
export const JobMoney = z.object({
  asOf: BusinessDate,
  contractSumToday: figure,
  /** Billed to date, gross. */
  billed: figure,
  /** Due from approved draws, to date. */
  approved: figure,
  paid: figure,
  open: figure,
  openHomeowner: figure,
  openLoan: figure,
  retainageHeld: figure,
  leftToBill: figure,
  depositLeft: figure,
  /** Processing fees; for the firm only. */
  fees: figure.nullable(),
  depositDueCents: z.int(),
  draws: z.array(DrawRow),
  payments: z.array(Payment),
});
export type JobMoney = z.infer<typeof JobMoney>;

const cents = z.int();
const CashMonth = z.object({
  /** YYYY-MM. */
  month: z.string(),
  homeownerCents: cents,
  loanCents: cents,
  notFundedCents: cents,
  totalCents: cents,
  runningCents: cents,
  carriedCents: cents,
  /** Changes that are out, should they be signed; in no other figure. */
  issuedCents: cents,
  runningWithIssuedCents: cents,
  steps: Step,
});
/** What has still to be paid, month by month: a forecast, not a demand. */
export const JobCashAhead = z.object({
  asOf: BusinessDate,
  ahead: z
    .object({
      months: z.array(CashMonth),
      leftToBillCents: cents,
      approvedUnpaidCents: cents,
      depositLeftCents: cents,
      withheldCents: cents,
      creditCents: cents,
      totalCents: cents,
      issuedCents: cents,
      steps: Step,
    })
    .nullable(),
});
export type JobCashAhead = z.infer<typeof JobCashAhead>;
