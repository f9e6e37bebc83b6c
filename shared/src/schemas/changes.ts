import { z } from 'zod';
import { lineClasses } from '../pricing/types.ts';
import { changeStates } from './change-states.ts';
import { BusinessDate, Decimal, Id, Instant, Line, NonNegativeCents, Rate, Sha256, Text, Version } from './common.ts';
import { Step } from './steps.ts';

export const changeOrigins = ['homeowner_wish', 'field_condition', 'design_correction', 'allowance', 'substitution', 'weather'] as const;
export const presentations = ['itemized', 'grouped', 'one_sum'] as const;
export const reviewKinds = ['designer_review', 'engineered_sheet', 'official_approval'] as const;
/** The wording that a signer agrees to; its version is bound into the signature. */
export const CONSENT_VERSION = '2026-12-01';

const Quantity = Decimal.refine((value) => !value.startsWith('-'), 'Must not be negative: deduct the line instead.');

export const CostLine = z.strictObject({
  id: Id,
  description: Line(300),
  class: z.enum(lineClasses),
  effect: z.enum(['add', 'deduct']),
  quantity: Quantity,
  unit: Line(20),
  unitCost: Quantity,
  taxable: z.boolean(),
});

const GroupRates = z.strictObject({ overheadRate: Rate, profitRate: Rate });
const Tier = z.strictObject({ upToCents: NonNegativeCents.nullable(), rate: Rate });
const AllModes = {
  laborBurdenRate: z.int('Enter a percentage such as 7.25.').min(0).max(30_000),
  tax: z.strictObject({ on: z.enum(['materials', 'price']), rate: Rate }),
  deducts: z.enum(['keep', 'give_back']),
  flatFeeCents: NonNegativeCents,
  insuranceRate: Rate,
};
/** How a firm prices; see the computation of a change's price. */
export const PricingTerms = z.discriminatedUnion('mode', [
  z.strictObject({ mode: z.literal('markup'), own: GroupRates, subcontract: GroupRates, profitOn: z.enum(['cost', 'cost_and_overhead']), ...AllModes }),
  z.strictObject({ mode: z.literal('margin'), marginRate: Rate, ...AllModes }),
  z.strictObject({ mode: z.literal('tiers'), overhead: z.array(Tier).min(1).max(10), profit: z.array(Tier).min(1).max(10), ...AllModes }),
]);
export const FirmPricing = z.object({ terms: PricingTerms, version: Version });
export const SetFirmPricing = z.strictObject({ terms: PricingTerms, version: Version });

const DraftFields = {
  title: Line(120, 3),
  /** Why, in plain words, for the homeowner. */
  reason: Text(2_000, 3),
  origin: z.enum(changeOrigins),
  structural: z.boolean(),
  days: z.int('Enter whole days.').min(0, 'Must not be negative.').max(365, 'Enter at most 365 days.'),
  milestoneId: Id.nullable(),
  goodUntil: BusinessDate,
  presentation: z.enum(presentations),
  noCharge: z.boolean(),
  lines: z.array(CostLine).max(500, 'Enter at most 500 lines.'),
  /** Photos of the job that explain it, in their order. */
  photoIds: z.array(Id).max(6, 'Choose at most 6 photos.').optional(),
  /** Null: the firm's own terms. */
  terms: PricingTerms.nullable(),
  /** Why these terms differ from the firm's. */
  termsReason: Text(500, 0),
};
export const DraftChange = z.strictObject({ id: Id, ...DraftFields });
export const EditChange = z.strictObject({ version: Version, ...DraftFields });
export const AttachReview = z.strictObject({ id: Id, kind: z.enum(reviewKinds), fileId: Id, reviewerName: Line(120, 2), license: Line(60, 0), reviewedOn: BusinessDate, note: Text(1_000, 0) });
export const IssueChange = z.strictObject({ version: Version });
export const AskReview = z.strictObject({ version: Version });
export const SignChange = z.strictObject({
  id: Id,
  typedName: Line(120, 2),
  consent: z.literal(true, 'Agree to sign electronically, or ask for paper.'),
  consentVersion: z.literal(CONSENT_VERSION),
  effectHash: Sha256,
  documentSha256: Sha256,
});
export const DeclineChange = z.strictObject({ reason: Text(2_000, 3) });
export const WithdrawChange = z.strictObject({ reason: Text(2_000, 3) });

const cents = z.int();
export const OwnersLine = z.object({ description: z.string(), effect: z.enum(['add', 'deduct']), cents });
/** What is built or taken out, without a price: labor and fees are no part of it. */
export const ScopeLine = z.object({ description: z.string(), effect: z.enum(['add', 'deduct']), quantity: z.string(), unit: z.string() });
export const ChangePhoto = z.object({ id: Id, note: z.string(), width: z.int(), height: z.int() });
export const Review = z.object({ id: Id, kind: z.enum(reviewKinds), fileId: Id, fileName: z.string(), fileSha256: z.string(), reviewerName: z.string(), license: z.string(), reviewedOn: BusinessDate, note: z.string(), /** False where what is built was altered after it. */ current: z.boolean() });
/** What is left to bill moves with every draw, so it is no part of what was agreed: null once signed. */
const Figures = z.object({ contractSumCents: cents, completionDate: BusinessDate, leftToBillCents: cents.nullable() });
const NextDraw = z.object({ dueNowCents: cents, homeownerCents: cents, loanCents: cents });
export const Effect = z.object({
  before: Figures,
  after: Figures,
  funding: z.enum(['nothing_to_pay', 'homeowner', 'homeowner_until_lender_agrees', 'less_to_pay']),
  needsLendersWord: z.boolean(),
  /** The first draw in which it is asked for, as things stand: null before there is a schedule, and once signed. */
  nextDraw: z.object({ before: NextDraw, after: NextDraw }).nullable(),
});

export const ChangeRow = z.object({
  id: Id,
  number: z.int(),
  revision: z.string(),
  title: z.string(),
  state: z.enum(changeStates),
  structural: z.boolean(),
  /** Null for people who may not see prices. */
  chargedCents: cents.nullable(),
  days: z.int(),
  milestoneId: Id.nullable(),
  milestoneName: z.string().nullable(),
  goodUntil: BusinessDate,
});
export const ChangeList = z.object({ items: z.array(ChangeRow), approvedCents: cents.nullable(), approvedDays: z.int() });

/** What only the firm sees of a change. */
export const ChangeCost = z.object({
  lines: z.array(CostLine),
  terms: PricingTerms,
  ownTerms: z.boolean(),
  termsReason: z.string(),
  priced: z.object({ netCostCents: cents, markupCents: cents, priceCents: cents, chargedCents: cents, steps: Step }),
});

export const Change = ChangeRow.extend({
  reason: z.string(),
  origin: z.enum(changeOrigins),
  presentation: z.enum(presentations),
  noCharge: z.boolean(),
  version: Version,
  lines: z.array(OwnersLine),
  scope: z.array(ScopeLine),
  photos: z.array(ChangePhoto),
  reviews: z.array(Review),
  effect: Effect.nullable(),
  steps: z.object({ contractSum: Step, completionDate: Step, leftToBill: Step, nextDraw: Step.nullable(), homeowner: Step.nullable() }).nullable(),
  effectHash: z.string().nullable(),
  /** Rendered by the worker shortly after it was issued. */
  document: z.object({ id: Id, sha256: z.string() }).nullable(),
  signedDocument: z.object({ id: Id, sha256: z.string() }).nullable(),
  signers: z.array(z.object({ personId: Id, name: z.string(), signedAt: Instant.nullable(), me: z.boolean() })),
  signersNeeded: z.enum(['one', 'all']),
  closedReason: z.string().nullable(),
  supersededBy: z.object({ id: Id, revision: z.string() }).nullable(),
  cost: ChangeCost.nullable(),
});

export type CostLine = z.infer<typeof CostLine>;
export type PricingTermsInput = z.infer<typeof PricingTerms>;
export type FirmPricing = z.infer<typeof FirmPricing>;
export type SetFirmPricing = z.infer<typeof SetFirmPricing>;
export type DraftChange = z.infer<typeof DraftChange>;
export type EditChange = z.infer<typeof EditChange>;
export type AttachReview = z.infer<typeof AttachReview>;
export type AskReview = z.infer<typeof AskReview>;
export type IssueChange = z.infer<typeof IssueChange>;
export type SignChange = z.infer<typeof SignChange>;
export type DeclineChange = z.infer<typeof DeclineChange>;
export type WithdrawChange = z.infer<typeof WithdrawChange>;
export type ChangeRow = z.infer<typeof ChangeRow>;
export type ChangeList = z.infer<typeof ChangeList>;
export type ChangeCost = z.infer<typeof ChangeCost>;
export type Change = z.infer<typeof Change>;
