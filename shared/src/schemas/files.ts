import { z } from 'zod';
import { Id, Instant, Sha256 } from './common.ts';
import type { Permission } from './permissions.ts';

/** What a file is for decides who may open it: whoever is on the job or the firm alone, and within that who has the permission. */
export const filePurposes = {
  contract: { audience: 'job', read: 'money.read' },
  plans: { audience: 'job', read: 'file.read' },
  permit: { audience: 'job', read: 'file.read' },
  review: { audience: 'job', read: 'file.read' },
  invoice: { audience: 'firm', read: 'money.read' },
  other: { audience: 'job', read: 'file.read' },
  // originals carry the place where they were taken
  photo: { audience: 'job', read: 'photo.place' },
} as const satisfies Record<string, { audience: 'job' | 'firm'; read: Permission }>;

export type FilePurpose = keyof typeof filePurposes;

/** The most bytes that one uploaded file may have. */
export const MOST_FILE_BYTES = 30_000_000;

/** The fields beside the file itself in a multipart upload. The id is made by the sender, so that a retry is the same file. */
export const AddFile = z.strictObject({ id: Id, purpose: z.enum(['contract', 'plans', 'permit', 'review', 'invoice', 'other']) });

export const StoredFile = z.object({
  id: Id,
  name: z.string(),
  purpose: z.enum(Object.keys(filePurposes) as [FilePurpose, ...FilePurpose[]]),
  mediaType: z.string(),
  bytes: z.int(),
  sha256: Sha256,
  createdAt: Instant,
});

export type AddFile = z.infer<typeof AddFile>;
export type StoredFile = z.infer<typeof StoredFile>;
