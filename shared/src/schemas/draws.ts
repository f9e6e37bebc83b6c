import { z } from 'zod';
import { BusinessDate, Id, Instant, NonNegativeCents, PositiveCents, Cents, Rate, Sha256, Text, Version } from './common.ts';
import { drawStates, reviewStates } from './draw-states.ts';
import { lineKinds } from './schedule-of-values.ts';
import { milestoneStates } from './milestones.ts';
import { Payment } from './payments.ts';
import { Step } from './steps.ts';

/** A new draw, drafted from what is proven up to a day. */
export const StartDraw = z.strictObject({ id: Id, throughOn: BusinessDate });
export const Redraft = z.strictObject({ version: Version });

/** One line as somebody typed it: work as a sum or as a share of the scheduled value; materials on hand as a balance. */
export const AdjustLine = z
  .strictObject({ lineId: Id, workCents: Cents.optional(), workRate: Rate.optional(), onHandCents: NonNegativeCents.optional() })
  .refine((line) => line.workCents === undefined || line.workRate === undefined, { path: ['workRate'], message: 'Enter the work as a sum or as a percentage, not both.' });
export const AdjustDraw = z.strictObject({
  version: Version,
  throughOn: BusinessDate.optional(),
  note: Text(2_000, 0).optional(),
  lines: z.array(AdjustLine).max(2_000),
});
export const SetDrawPhotos = z.strictObject({ version: Version, photoIds: z.array(Id).max(200, 'Attach at most 200 photos.') });
export const SubmitDraw = z.strictObject({ version: Version });
export const ReturnDraw = z.strictObject({ reason: Text(2_000, 3) });
export const VoidDraw = z.strictObject({ reason: Text(2_000, 3) });
export const ObjectToLine = z.strictObject({ id: Id, lineId: Id, objectedCents: PositiveCents, reason: Text(1_000, 3) });
/** The effect that was shown is what is approved. */
export const ApproveDraw = z.strictObject({ id: Id, effectHash: Sha256 });

export const Inspected = z.strictObject({ id: Id, onDate: BusinessDate, note: Text(2_000, 0) });
export const AllowDraw = z.strictObject({
  id: Id,
  onDate: BusinessDate,
  note: Text(2_000, 0),
  /** What must be met before money is sent; empty: nothing. */
  conditions: Text(2_000, 0),
  /** The share of each line's scheduled value taken as built to date; a line that isn't named is taken as billed. */
  lines: z.array(z.strictObject({ lineId: Id, percent: Rate, reason: Text(1_000, 0) })).max(2_000),
});
export const FundDraw = z.strictObject({ id: Id, amountCents: PositiveCents, fundedOn: BusinessDate, reference: Text(120) });

const cents = z.int();
export const DrawLine = z.object({
  lineId: Id,
  number: z.string(),
  phase: z.string(),
  description: z.string(),
  kind: z.enum(lineKinds),
  milestoneId: Id.nullable(),
  scheduledCents: cents,
  workCents: cents,
  onHandCents: cents,
  workRate: z.int(),
  billedRate: z.int(),
  billedBeforeCents: cents,
  thisDrawCents: cents,
  leftCents: cents,
  retainageCents: cents,
  objection: z.object({ id: Id, objectedCents: cents, reason: z.string(), by: z.string() }).nullable(),
  /** How far the lender takes the line to be; null before its word. */
  allowedRate: z.int().nullable(),
});

export const DrawSummary = z.object({
  contractSumAsSignedCents: cents,
  changesApprovedCents: cents,
  contractSumTodayCents: cents,
  workInPlaceCents: cents,
  materialsOnHandCents: cents,
  retainageHeldCents: cents,
  earnedToDateCents: cents,
  billedBeforeCents: cents,
  withheldCents: cents,
  depositUsedToDateCents: cents,
  depositUsedNowCents: cents,
  creditBeforeCents: cents,
  dueNowCents: cents,
  creditCarriedCents: cents,
  leftToBillCents: cents,
});

const Who = z.object({ id: Id, name: z.string() });
const drawFields = {
  id: Id,
  number: z.int(),
  state: z.enum(drawStates),
  reviewState: z.enum(reviewStates),
  throughOn: BusinessDate,
  dueCents: cents,
  homeownerCents: cents,
  loanCents: cents,
  /** What the builder has of each part now, and what is open. */
  paidHomeownerCents: cents,
  paidLoanCents: cents,
  openHomeownerCents: cents,
  openLoanCents: cents,
  dueOn: BusinessDate.nullable(),
  submittedAt: Instant.nullable(),
  approvedAt: Instant.nullable(),
};
export const DrawRow = z.object(drawFields).meta({ id: 'DrawRow' });
export const DrawList = z.object({ items: z.array(DrawRow) });

export const Draw = z.object({
  ...drawFields,
  version: Version,
  note: z.string(),
  returnReason: z.string().nullable(),
  jobName: z.string(),
  firmName: z.string(),
  lines: z.array(DrawLine),
  milestones: z.array(z.object({ id: Id, name: z.string(), state: z.enum(milestoneStates), percent: Rate, provenOn: BusinessDate.nullable() })),
  summary: DrawSummary,
  /** The arithmetic behind the figures that are opened. */
  steps: z.object({ contractSumToday: Step, retainageHeld: Step, earnedToDate: Step, dueNow: Step, leftToBill: Step, homeowner: Step, loan: Step }),
  lenderName: z.string().nullable(),
  /** What approving does, as a hash; it goes with the approval. */
  effectHash: Sha256,
  /** When it would be due if it were approved today. */
  dueOnIfToday: BusinessDate,
  approvals: z.array(Who.extend({ at: Instant })),
  /** Homeowners whose approval is still needed, and invited ones who have not joined. */
  awaited: z.array(Who),
  invitedHomeowners: z.int(),
  photos: z.array(z.object({ id: Id, milestoneId: Id, note: z.string(), takenAt: Instant.nullable() })),
  reviews: z.array(z.object({ step: z.enum(['inspected', 'allowed']), onDate: BusinessDate, note: z.string(), conditions: z.string(), by: z.string(), at: Instant })),
  fundings: z.array(z.object({ amountCents: cents, fundedOn: BusinessDate, reference: z.string(), by: z.string(), received: z.boolean() })),
  payments: z.array(Payment),
  /** Whether the reader approved already. */
  approvedByMe: z.boolean(),
}).meta({ id: 'Draw' });

export type StartDraw = z.infer<typeof StartDraw>;
export type Redraft = z.infer<typeof Redraft>;
export type AdjustLine = z.infer<typeof AdjustLine>;
export type AdjustDraw = z.infer<typeof AdjustDraw>;
export type SetDrawPhotos = z.infer<typeof SetDrawPhotos>;
export type SubmitDraw = z.infer<typeof SubmitDraw>;
export type ReturnDraw = z.infer<typeof ReturnDraw>;
export type VoidDraw = z.infer<typeof VoidDraw>;
export type ObjectToLine = z.infer<typeof ObjectToLine>;
export type ApproveDraw = z.infer<typeof ApproveDraw>;
export type Inspected = z.infer<typeof Inspected>;
export type AllowDraw = z.infer<typeof AllowDraw>;
export type FundDraw = z.infer<typeof FundDraw>;
export type DrawLine = z.infer<typeof DrawLine>;
export type DrawRow = z.infer<typeof DrawRow>;
export type DrawList = z.infer<typeof DrawList>;
export type Draw = z.infer<typeof Draw>;
