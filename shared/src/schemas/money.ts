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
