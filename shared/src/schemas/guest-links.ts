import { z } from 'zod';
import { Email, Id, Instant, Line, Rate, Text } from './common.ts';
import { Inspect, milestoneStates } from './milestones.ts';
import { Photo } from './photos.ts';

/** From which side a link is sent: a firm's member sends it for the firm, whatever else they are. */
export const senderSides = ['firm', 'lender', 'homeowner'] as const;
export type SenderSide = (typeof senderSides)[number];

/** Whose inspector it is. */
export const inspectorsFor = ['lender', 'homeowner', 'town', 'firm'] as const;
export type InspectorFor = (typeof inspectorsFor)[number];

/** Whose inspectors each side may send a link to. */
export const maySendFor: Readonly<Record<SenderSide, readonly InspectorFor[]>> = {
  lender: ['lender', 'town'],
  homeowner: ['homeowner', 'town'],
  firm: ['town', 'lender', 'homeowner', 'firm'],
};

/**
 * Whether what this inspector sees proves a milestone. Whoever is paid by a proof can't choose who gives it: what a link of the firm
 * brings is kept and shown, and is no proof. The town's inspector is the exception, since it is the firm that calls for the town's
 * inspections (common practice, no source). A refusal counts from whomever it comes.
 */
export const countsAsProof = (side: SenderSide, onBehalf: InspectorFor): boolean => side !== 'firm' || onBehalf === 'town';

export const LINK_DAYS = { least: 14, most: 30 } as const;

export const SendInspectorLink = z.strictObject({
  id: Id,
  name: Line(120, 2),
  email: Email,
  onBehalf: z.enum(inspectorsFor),
  milestoneIds: z
    .array(Id)
    .min(1, 'Choose at least one milestone.')
    .max(20, 'Choose at most 20 milestones.')
    .refine((ids) => new Set(ids).size === ids.length, 'Choose each milestone once.'),
  note: Text(1_000, 0).default(''),
  days: z.int('Enter a number of days.').min(LINK_DAYS.least, 'A link lives at least 14 days.').max(LINK_DAYS.most, 'A link lives at most 30 days.').default(LINK_DAYS.least),
});

/** on_its_way: not mailed yet; done: everything it asks for is answered. */
export const guestLinkStates = ['on_its_way', 'sent', 'opened', 'done', 'expired', 'revoked'] as const;
export type GuestLinkState = (typeof guestLinkStates)[number];

export const GuestLink = z.object({
  id: Id,
  name: z.string(),
  /** Whole for who sent it, masked for the others on the job. */
  email: z.string(),
  onBehalf: z.enum(inspectorsFor),
  senderSide: z.enum(senderSides),
  sentBy: z.object({ id: Id, name: z.string() }),
  /** Whether what comes back can prove something. */
  counts: z.boolean(),
  state: z.enum(guestLinkStates),
  milestones: z.array(z.object({ id: Id, name: z.string(), answeredAt: Instant.nullable() })),
  sentAt: Instant,
  openedAt: Instant.nullable(),
  expiresAt: Instant,
  /** Whether the reader may send it again or revoke it. */
  mine: z.boolean(),
});
export const GuestLinks = z.object({ items: z.array(GuestLink) });

/** 32 random bytes in base64url. */
export const OpenGuestLink = z.strictObject({ token: z.string().regex(/^[A-Za-z0-9_-]{43}$/) });
/** All that a link tells without its code. */
export const GuestDoor = z.object({ firmName: z.string(), sentTo: z.string(), expiresAt: Instant, confirmed: z.boolean() });
export const GuestCode = z.strictObject({ code: z.string().trim().regex(/^\d{6}$/, 'Enter the 6 digits from the mail.') });

/** What a guest saw, and who they are. */
export const GuestInspect = Inspect.safeExtend({ name: Line(120, 2), company: Line(160, 2), license: Line(80, 0).default('') });

export const GuestVisit = z.object({
  linkId: Id,
  name: z.string(),
  note: z.string(),
  onBehalf: z.enum(inspectorsFor),
  senderSide: z.enum(senderSides),
  senderName: z.string(),
  counts: z.boolean(),
  firmName: z.string(),
  jobName: z.string(),
  place: z.string(),
  timeZone: z.string(),
  today: z.string(),
  milestones: z.array(
    z.object({
      id: Id,
      name: z.string(),
      state: z.enum(milestoneStates),
      percent: Rate,
      version: z.int(),
      claimedAt: Instant.nullable(),
      claimedBy: z.string().nullable(),
      answeredAt: Instant.nullable(),
      /** What belongs to it, by the schedule of values; without sums. */
      parts: z.array(z.string()),
      photos: z.array(Photo),
    }),
  ),
});

export type SendInspectorLink = z.infer<typeof SendInspectorLink>;
export type GuestLink = z.infer<typeof GuestLink>;
export type GuestLinks = z.infer<typeof GuestLinks>;
export type OpenGuestLink = z.infer<typeof OpenGuestLink>;
export type GuestDoor = z.infer<typeof GuestDoor>;
export type GuestCode = z.infer<typeof GuestCode>;
export type GuestInspect = z.infer<typeof GuestInspect>;
export type GuestVisit = z.infer<typeof GuestVisit>;
