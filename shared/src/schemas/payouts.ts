import { z } from 'zod';

/** How far the firm's account for being paid is. */
export const Payouts = z.object({
  /** none: never asked for; opening: being made; incomplete: the payment service still wants something; ready: payments can start. */
  state: z.enum(['none', 'opening', 'incomplete', 'ready']),
  chargesEnabled: z.boolean(),
  payoutsEnabled: z.boolean(),
  /** Where the principal enters the firm's details; short-lived, and only for whoever sets it up. */
  linkUrl: z.string().nullable(),
  trouble: z.string().nullable(),
});
export type Payouts = z.infer<typeof Payouts>;
