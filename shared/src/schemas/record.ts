import { z } from 'zod';

export const recordChains = ['shared', 'firm'] as const;
export type RecordChain = (typeof recordChains)[number];
/** How many entries travel at once. */
export const RECORD_PAGE = 500;

export const RecordQuery = z.strictObject({
  /** What the whole job sees, or what the firm keeps to itself. */
  chain: z.enum(recordChains).default('shared'),
  /** Entries after this one; 0 begins with the first. */
  after: z.coerce.number().int().min(0).default(0),
});

/** A part of a chain, as it is stored: whoever reads it can check it without the server. */
export const RecordPart = z.object({
  chain: z.enum(recordChains),
  /** The last entry and its hash, as the record's head has them. */
  head: z.object({ seq: z.int(), hash: z.string() }),
  entries: z.array(
    z.object({
      seq: z.int(),
      /** The exact canonical text that was hashed. */
      text: z.string(),
      hash: z.string(),
      /** Whoever acted, Tallypole where it acted by itself; null where the name was erased. It stands beside the text, not in it. */
      byName: z.string().nullable(),
    }),
  ),
});
export type RecordQuery = z.infer<typeof RecordQuery>;
export type RecordPart = z.infer<typeof RecordPart>;
