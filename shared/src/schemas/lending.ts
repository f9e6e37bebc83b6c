import { z } from 'zod';
import { BusinessDate, Id, Instant } from './common.ts';
import { drawStates, reviewStates } from './draw-states.ts';

/** The one thing that keeps a draw from being funded today, or nothing. */
export const fundingBlockers = ['returned', 'not_inspected', 'unproven', 'not_allowed', 'conditions', 'not_approved'] as const;
export type FundingBlocker = (typeof fundingBlockers)[number];

export const LendingRow = z.object({
  jobId: Id,
  jobName: z.string(),
  firmName: z.string(),
  drawId: Id,
  number: z.int(),
  state: z.enum(drawStates),
  reviewState: z.enum(reviewStates),
  throughOn: BusinessDate,
  dueOn: BusinessDate.nullable(),
  /** What the loan is asked for, what of it was sent, and what is left. */
  loanCents: z.int(),
  sentCents: z.int(),
  loanOpenCents: z.int(),
  dueCents: z.int(),
  /** Proven and billed to date, by the lines of milestones. */
  provenCents: z.int(),
  billedCents: z.int(),
  photos: z.int(),
  approvals: z.object({ given: z.int(), needed: z.int() }),
  conditions: z.string(),
  blocker: z.enum(fundingBlockers).nullable(),
  submittedAt: Instant,
});
export const Lending = z.object({ items: z.array(LendingRow) });
export type LendingRow = z.infer<typeof LendingRow>;
export type Lending = z.infer<typeof Lending>;
