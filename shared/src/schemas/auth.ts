import { z } from 'zod';
import { Email, Id, Instant, Line } from './common.ts';
import { FirmRole, JobRole } from './roles.ts';

export const AskForCode = z.strictObject({ email: Email });
export const CodeSent = z.object({ sentTo: z.string(), expiresAt: Instant });

const Code = z.string().trim().regex(/^\d{6}$/, 'Enter the 6 digits from the mail.');
export const SignIn = z.strictObject({ email: Email, code: Code });

/** Any characters, unmodified; 256 are more than anybody types and bound what a hash costs. */
const Entered = z.string().min(1, 'Enter the password.').max(256, 'A password has at most 256 characters.');
export const SignInByPassword = z.strictObject({ email: Email, password: Entered });

/** Digits of an authenticator, or a recovery code of ten letters and digits; written with spaces, hyphens, or letters that look like digits. */
const SecondCode = z
  .string()
  .transform((typed) => typed.replace(/[\s-]/g, '').toUpperCase().replace(/[IL]/g, '1').replace(/O/g, '0'))
  .pipe(z.string().regex(/^(\d{6}|[0-9A-HJKMNP-TV-Z]{10})$/, 'Enter the 6 digits, or a recovery code of 10 letters and digits.'));
export const SecondStep = z.strictObject({ code: SecondCode });
/** The first step was right; the person's second one is waited for, in the same browser. */
export const SecondStepAsked = z.object({ next: z.literal('second_step') });

/** By a mailed code, or by what the person's second step asks for. */
export const ProvePresence = z.strictObject({ code: SecondCode });
export const PresenceAsked = z.discriminatedUnion('by', [
  z.object({ by: z.literal('mail'), sentTo: z.string(), expiresAt: Instant }),
  z.object({ by: z.literal('authenticator') }),
]);

export const Name = z.strictObject({ name: Line(120, 2) });

/** Whether a person has a second step when they sign in, and if not, how much their roles ask for one. */
export const SecondStepUse = z.enum(['on', 'required', 'advised', 'optional']);

export const Me = z.object({
  person: z.object({ id: Id, name: z.string().nullable(), email: z.string() }),
  secondStep: SecondStepUse,
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
export type SignInByPassword = z.infer<typeof SignInByPassword>;
export type SecondStep = z.infer<typeof SecondStep>;
export type SecondStepAsked = z.infer<typeof SecondStepAsked>;
export type ProvePresence = z.infer<typeof ProvePresence>;
export type PresenceAsked = z.infer<typeof PresenceAsked>;
export type Name = z.infer<typeof Name>;
export type Me = z.infer<typeof Me>;
export type DemoPeople = z.infer<typeof DemoPeople>;
