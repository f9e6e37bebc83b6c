import { z } from 'zod';

/** The process runs. */
export const Alive = z.object({ status: z.literal('ok') });
export type Alive = z.infer<typeof Alive>;

/** Requests can be served now. */
export const Ready = z.object({
  status: z.literal('ready'),
  /** How long the oldest job that is due has been waiting for a worker. */
  queueWaitingSeconds: z.int().min(0),
});
export type Ready = z.infer<typeof Ready>;
