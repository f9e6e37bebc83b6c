import { z } from 'zod';
import { BusinessDate, Id, Instant, Rate, Text, Version } from './common.ts';
import { JobRole } from './roles.ts';

export const milestoneStates = ['upcoming', 'under_way', 'claimed', 'proven'] as const;
export type MilestoneState = (typeof milestoneStates)[number];

export const inspectionResults = ['passed', 'failed', 'partial'] as const;
export type InspectionResult = (typeof inspectionResults)[number];

/** Every act that moves a milestone: from which states, to which. An inspection's result is the act that it stands for. */
export const milestoneActs = {
  start: { from: ['upcoming'], to: 'under_way' },
  claim: { from: ['upcoming', 'under_way'], to: 'claimed' },
  passed: { from: ['claimed'], to: 'proven' },
  partial: { from: ['under_way', 'claimed'], to: 'under_way' },
  failed: { from: ['claimed'], to: 'under_way' },
  reopen: { from: ['proven'], to: 'under_way' },
} as const satisfies Record<string, { from: readonly MilestoneState[]; to: MilestoneState }>;
export type MilestoneAct = keyof typeof milestoneActs;

/** The state after an act, or null where the act isn't possible from this state. */
export const stateAfter = (state: MilestoneState, act: MilestoneAct): MilestoneState | null =>
  (milestoneActs[act].from as readonly MilestoneState[]).includes(state) ? milestoneActs[act].to : null;

export const PlanMilestone = z.strictObject({ version: Version, plannedOn: BusinessDate.nullable(), forecastOn: BusinessDate.nullable() });
export const StartMilestone = z.strictObject({ version: Version });
export const ClaimMilestone = z.strictObject({ version: Version, note: Text(1_000, 0).default('') });
export const ReopenMilestone = z.strictObject({ version: Version, reason: Text(1_000, 3) });

/** What somebody from outside the firm saw. A pass is the whole; a part needs its percentage; a failure its reason. */
export const Inspect = z
  .strictObject({
    id: Id,
    version: Version,
    result: z.enum(inspectionResults),
    /** In place, in basis points; for a part only. */
    percent: Rate.nullable().default(null),
    note: Text(2_000, 0).default(''),
    seenOn: BusinessDate,
  })
  .refine(({ result, percent }) => result !== 'partial' || (percent !== null && percent > 0 && percent < 10_000), {
    path: ['percent'],
    message: 'Enter how much is in place, between 0 and 100 %.',
  })
  .refine(({ result, percent }) => result === 'partial' || percent === null, { path: ['percent'], message: 'Only a part has a percentage.' })
  .refine(({ result, note }) => result !== 'failed' || note.length >= 3, { path: ['note'], message: 'Say what is missing or wrong.' });

const Person = z.object({ id: Id, name: z.string() });

export const Milestone = z.object({
  id: Id,
  position: z.int(),
  name: z.string(),
  state: z.enum(milestoneStates),
  plannedOn: BusinessDate.nullable(),
  forecastOn: BusinessDate.nullable(),
  /** The day it was claimed as finished. */
  actualOn: BusinessDate.nullable(),
  percent: Rate,
  /** Its lines, changes included; null for whoever may not see sums. */
  scheduledCents: z.int().nullable(),
  photos: z.object({ ready: z.int(), waiting: z.int(), unreadable: z.int() }),
  claimedAt: Instant.nullable(),
  claimedBy: Person.nullable(),
  provenAt: Instant.nullable(),
  provenBy: Person.nullable(),
  version: Version,
});

export const Inspection = z.object({
  id: Id,
  result: z.enum(inspectionResults),
  percent: Rate,
  note: z.string(),
  seenOn: BusinessDate,
  by: Person,
  role: JobRole,
  /** False where the firm itself sent whoever looked: kept, and no proof. */
  independent: z.boolean(),
  /** Whoever came by a link instead of an account, in their own words; null where erased. */
  guest: z
    .object({ onBehalf: z.enum(['lender', 'homeowner', 'town', 'firm']), senderSide: z.enum(['firm', 'lender', 'homeowner']), company: z.string().nullable(), license: z.string().nullable() })
    .nullable(),
  at: Instant,
});

export const MilestoneList = z.object({ items: z.array(Milestone), today: BusinessDate });
export const MilestoneDetail = Milestone.extend({ inspections: z.array(Inspection) });

export type PlanMilestone = z.infer<typeof PlanMilestone>;
export type StartMilestone = z.infer<typeof StartMilestone>;
export type ClaimMilestone = z.infer<typeof ClaimMilestone>;
export type ReopenMilestone = z.infer<typeof ReopenMilestone>;
export type Inspect = z.infer<typeof Inspect>;
export type Milestone = z.infer<typeof Milestone>;
export type Inspection = z.infer<typeof Inspection>;
export type MilestoneList = z.infer<typeof MilestoneList>;
export type MilestoneDetail = z.infer<typeof MilestoneDetail>;
