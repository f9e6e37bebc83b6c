import { z } from 'zod';
import { Email, Id, Instant, Line } from './common.ts';
import { FirmRole, JobRole } from './roles.ts';

export const Invite = z.strictObject({ id: Id, email: Email, name: Line(120, 2), role: JobRole });

export const JobPerson = z.object({ personId: Id, name: z.string(), email: z.string().nullable(), role: z.union([FirmRole, JobRole]) });
export const OpenInvitation = z.object({ id: Id, email: z.string(), name: z.string(), role: JobRole, invitedAt: Instant, expiresAt: Instant });
export const JobPeople = z.object({ people: z.array(JobPerson), invitations: z.array(OpenInvitation) });

export type Invite = z.infer<typeof Invite>;
export type JobPeople = z.infer<typeof JobPeople>;
