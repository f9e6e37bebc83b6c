import { z } from 'zod';
import { Email, Id, Instant, Line } from './common.ts';
import { openInvitationStates } from './people.ts';
import { FirmRole } from './roles.ts';

export const InviteMember = z.strictObject({ id: Id, email: Email, name: Line(120, 2), role: FirmRole });
export const SetMemberRole = z.strictObject({ role: FirmRole });
export const Members = z.object({
  members: z.array(z.object({ personId: Id, name: z.string(), email: z.string(), role: FirmRole })),
  invitations: z.array(z.object({ id: Id, email: z.string(), name: z.string(), role: FirmRole, state: z.enum(openInvitationStates), expiresAt: Instant })),
});

export type InviteMember = z.infer<typeof InviteMember>;
export type SetMemberRole = z.infer<typeof SetMemberRole>;
export type Members = z.infer<typeof Members>;
