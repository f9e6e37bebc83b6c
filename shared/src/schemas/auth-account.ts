import { z } from 'zod';
import { SecondStepUse } from './auth.ts';
import { Email, Id, Instant } from './common.ts';
import type { Permission } from './permissions.ts';

/** Acts that need a second step of whoever performs them, where the deployment asks for one: bank data, money, and who may touch them. */
export const actsWithSecondStep: readonly Permission[] = ['payout.setup', 'payment.record', 'draw.fund', 'firm.members', 'firm.invite'];

/** Characters as people count them. */
const count = (text: string): number => [...text].length;
/** Any characters: what is easy to guess is refused by the server, which knows the list of common ones. */
const NewPassword = z
  .string()
  .refine((text) => count(text) >= 12, 'Use at least 12 characters. A few words are easier to remember than signs.')
  .refine((text) => count(text) <= 256, 'Use at most 256 characters.');
export const SetPassword = z.strictObject({ password: NewPassword });

export const Session = z.object({
  id: Id,
  /** In plain words: "Firefox on Windows". */
  device: z.string(),
  startedAt: Instant,
  /** To within ten minutes. */
  lastSeenAt: Instant,
  endsAt: Instant,
  current: z.boolean(),
});

/** Everything about how a person gets in. */
export const Account = z.object({
  password: z.object({ setAt: Instant }).nullable(),
  secondStep: z.object({ use: SecondStepUse, since: Instant.nullable(), recoveryCodesLeft: z.int() }),
  sessions: z.array(Session),
});

/** What an authenticator is told, as a picture and as text. */
export const SecondStepKey = z.object({ uri: z.string(), key: z.string() });
export const ConfirmSecondStep = z.strictObject({ code: z.string().transform((typed) => typed.replace(/\s/g, '')).pipe(z.string().regex(/^\d{6}$/, 'Enter the 6 digits that the authenticator shows.')) });
/** Shown once. */
export const RecoveryCodes = z.object({ codes: z.array(z.string()), account: Account });

export const AskForAddress = z.strictObject({ email: Email });
export const ChangeAddress = z.strictObject({ code: z.string().transform((typed) => typed.replace(/\s/g, '')).pipe(z.string().regex(/^\d{6}$/, 'Enter the 6 digits from the mail.')) });
export const UndoAddress = z.strictObject({ token: z.string().min(20).max(100) });

export type SetPassword = z.infer<typeof SetPassword>;
export type Account = z.infer<typeof Account>;
export type SecondStepKey = z.infer<typeof SecondStepKey>;
export type ConfirmSecondStep = z.infer<typeof ConfirmSecondStep>;
export type RecoveryCodes = z.infer<typeof RecoveryCodes>;
export type AskForAddress = z.infer<typeof AskForAddress>;
export type ChangeAddress = z.infer<typeof ChangeAddress>;
export type UndoAddress = z.infer<typeof UndoAddress>;
