import { z } from 'zod';
import { Email, Id, Instant, Line } from './common.ts';
import { FirmRole, JobRole } from './roles.ts';

/** How long an invitation is good, from when it was last sent. */
export const INVITATION_DAYS = 14;

export const Invite = z.strictObject({ id: Id, email: Email, name: Line(120, 2), role: JobRole });
/** Somebody leaves the job in one of their roles. */
export const RemovePerson = z.strictObject({ role: JobRole });

/** Of an invitation that nobody has accepted or taken back. */
export const openInvitationStates = ['open', 'expired'] as const;

export const JobPerson = z.object({ personId: Id, name: z.string(), email: z.string().nullable(), role: z.union([FirmRole, JobRole]) });
export const OpenInvitation = z.object({ id: Id, email: z.string(), name: z.string(), role: JobRole, state: z.enum(openInvitationStates), sentAt: Instant, expiresAt: Instant });
export const JobPeople = z.object({ people: z.array(JobPerson), invitations: z.array(OpenInvitation) });

/** What became of an invitation, for whoever it was sent to. */
export const MyInvitation = z.object({
  firmName: z.string(),
  senderName: z.string(),
  /** Null where it leads into the firm itself. */
  jobId: Id.nullable(),
  firmId: Id,
  state: z.enum(['open', 'accepted', 'expired', 'revoked']),
});

export type Invite = z.infer<typeof Invite>;
export type RemovePerson = z.infer<typeof RemovePerson>;
export type JobPeople = z.infer<typeof JobPeople>;
export type MyInvitation = z.infer<typeof MyInvitation>;
