import { z } from 'zod';
import { BusinessDate, Id, Instant, Line, NonNegativeCents, PositiveCents, Rate, TimeZone, Version, list } from './common.ts';
import { FirmRole, JobRole } from './roles.ts';

export const contractStyles = ['percent_complete', 'milestone_sums', 'cost_plus'] as const;

export const Address = z.strictObject({
  street: Line(160),
  city: Line(80),
  state: z.string().trim().toUpperCase().regex(/^[A-Z]{2}$/, 'Enter the state as two letters, such as OH.'),
  zip: z.string().trim().regex(/^\d{5}(-\d{4})?$/, 'Enter a ZIP code such as 45011.'),
});

/** The terms of the contract; rates in basis points, days as the contract counts them. */
export const ContractTerms = z.strictObject({
  style: z.enum(contractStyles),
  contractSumCents: PositiveCents,
  signedOn: BusinessDate,
  startOn: BusinessDate,
  completeBy: BusinessDate,
  dayKind: z.enum(['calendar', 'working']),
  retainageRate: Rate,
  depositCents: NonNegativeCents,
  reviewDays: z.int().min(0).max(60),
  paymentDays: z.int().min(0).max(120),
  lateRate: Rate,
  /** How many of the homeowners must sign a change or approve a draw. */
  homeownersSign: z.enum(['one', 'all']),
  openBook: z.boolean(),
});

const completionAfterStart = (terms: { startOn: string; completeBy: string }) => terms.completeBy > terms.startOn;
const depositWithinSum = (terms: { depositCents: number; contractSumCents: number }) => terms.depositCents <= terms.contractSumCents;

export const CreateJob = z.strictObject({
  id: Id,
  firmId: Id,
  name: Line(120, 2),
  address: Address,
  timeZone: TimeZone,
  terms: ContractTerms.refine(completionAfterStart, { path: ['completeBy'], message: 'Completion must be after the start.' }).refine(
    depositWithinSum,
    { path: ['depositCents'], message: 'The deposit must not be more than the contract sum.' },
  ),
});

/** One job in a list. */
export const JobRow = z.object({
  id: Id,
  firmId: Id,
  firmName: z.string(),
  name: z.string(),
  address: Address,
  contractSumTodayCents: z.int(),
  /** What it is made of: as signed, and what changes added since. */
  contractSumCents: z.int(),
  approvedChangesCents: z.int(),
  completeBy: BusinessDate,
  createdAt: Instant,
});
export const JobList = list(JobRow);

export const Job = JobRow.extend({
  timeZone: z.string(),
  terms: ContractTerms,
  approvedDays: z.int(),
  completionDate: BusinessDate,
  today: BusinessDate,
  version: Version,
  /** What the reader is on this job. */
  roles: z.array(z.union([FirmRole, JobRole])),
});

export type Address = z.infer<typeof Address>;
export type ContractTerms = z.infer<typeof ContractTerms>;
export type CreateJob = z.infer<typeof CreateJob>;
export type JobRow = z.infer<typeof JobRow>;
export type JobList = z.infer<typeof JobList>;
export type Job = z.infer<typeof Job>;
