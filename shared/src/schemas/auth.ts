import { z } from 'zod';
import { Email, Id, Instant, Line } from './common.ts';
import { FirmRole, JobRole } from './roles.ts';

export const AskForCode = z.strictObject({ email: Email });
export const CodeSent = z.object({ sentTo: z.string(), expiresAt: Instant });

const Code = z.string().trim().regex(/^\d{6}$/, 'Enter the 6 digits from the mail.');
export const SignIn = z.strictObject({ email: Email, code: Code });
export const ProvePresence = z.strictObject({ code: Code });

export const Name = z.strictObject({ name: Line(120, 2) });

export const Me = z.object({
  person: z.object({ id: Id, name: z.string().nullable(), email: z.string() }),
  firms: z.array(z.object({ id: Id, name: z.string(), role: FirmRole })),
  jobs: z.array(z.object({ id: Id, name: z.string(), firmId: Id, firmName: z.string(), roles: z.array(JobRole) })),
  invitations: z.array(z.object({ id: Id, role: JobRole, jobName: z.string(), firmName: z.string() })),
});

export const DemoPeople = z.object({
  people: z.array(z.object({ name: z.string(), email: z.string(), role: z.string(), what: z.string() })),
  mailPageUrl: z.string().nullable(),
});

export type AskForCode = z.infer<typeof AskForCode>;
export type CodeSent = z.infer<typeof CodeSent>;
export type SignIn = z.infer<typeof SignIn>;
export type ProvePresence = z.infer<typeof ProvePresence>;
export type Name = z.infer<typeof Name>;
export type Me = z.infer<typeof Me>;
export type DemoPeople = z.infer<typeof DemoPeople>;
