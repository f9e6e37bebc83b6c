import { z } from 'zod';
import { BusinessDate, Id } from './common.ts';
import { milestoneStates } from './milestones.ts';

const cents = z.int();
const Sums = { scheduledCents: cents, provenCents: cents, billedCents: cents, paidCents: cents };

/** What the pole draws; for people who may not see prices the amounts are shares of 10,000. */
export const Pole = z.object({
  milestones: z.array(
    z.object({
      id: Id,
      name: z.string(),
      state: z.enum(milestoneStates),
      ...Sums,
      changes: z.array(z.object({ id: Id, label: z.string(), pending: z.boolean() })).readonly(),
    }),
  ).readonly(),
  general: z.object(Sums),
  expectedTodayCents: cents.nullable(),
  prices: z.boolean(),
});

export const waitKinds = ['milestone_to_prove', 'change_to_decide', 'draw_to_approve', 'draw_to_pay', 'draw_to_fund'] as const;

/** One thing that somebody is waited for, oldest first. */
export const Wait = z.object({
  kind: z.enum(waitKinds),
  /** The record: milestone, change or draw. */
  id: Id,
  title: z.string(),
  cents: cents.nullable(),
  since: BusinessDate,
  dueOn: BusinessDate.nullable(),
  mine: z.boolean(),
  waitsFor: z.array(z.string()),
});

/** The next milestone that isn't proven, and when it is planned or forecast. */
export const NextMilestone = z.object({ id: Id, name: z.string(), on: BusinessDate.nullable() });

export const House = z.object({ pole: Pole, next: NextMilestone.nullable(), waits: z.array(Wait) });

/** What waits on all of somebody's jobs, oldest first. */
export const AllWaits = z.object({ items: z.array(Wait.extend({ jobId: Id, jobName: z.string() })) });

export type House = z.infer<typeof House>;
export type Wait = z.infer<typeof Wait>;
export type AllWaits = z.infer<typeof AllWaits>;
