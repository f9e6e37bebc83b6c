import { z } from 'zod';
import { Id, Instant, Line, TimeZone, Version } from './common.ts';

export const StartFirm = z.strictObject({ id: Id, name: Line(120, 2), timeZone: TimeZone });
export const Firm = z.object({ id: Id, name: z.string(), timeZone: z.string() });

/** The most bytes that a logo may have as it is sent, and the box in pixels that it is made to fit. */
export const MOST_LOGO_BYTES = 1_000_000;
export const LOGO_BOX = { width: 600, height: 240 } as const;
export const logoStates = ['none', 'stored', 'ready', 'unreadable'] as const;

/** What stands on the firm's papers. An address is all of it or none. */
export const FirmSettingsInput = z
  .strictObject({
    version: Version,
    name: Line(120, 2),
    street: Line(160, 0),
    city: Line(80, 0),
    state: z.string().trim().toUpperCase().regex(/^([A-Z]{2})?$/, 'Enter the state as two letters, such as OH.'),
    zip: z.string().trim().regex(/^(\d{5}(-\d{4})?)?$/, 'Enter a ZIP code such as 45011.'),
    phone: Line(40, 0).refine((phone) => phone === '' || (/^[+\d(][\d\s().+/-]*(\s?(x|ext\.?)\s?\d+)?$/i.test(phone) && phone.replace(/\D/g, '').length >= 7), 'Enter a phone number such as (513) 555-0142.'),
    license: Line(80, 0),
    /** Whether the firm's site people see what changes cost the homeowners. */
    siteSeesPrices: z.boolean(),
  })
  .superRefine((settings, context) => {
    const parts = ['street', 'city', 'state', 'zip'] as const;
    if (parts.every((part) => settings[part] === '')) return;
    for (const part of parts) if (settings[part] === '') context.addIssue({ code: 'custom', path: [part], message: 'Enter the whole address, or leave all of it empty.' });
  });

export const FirmSettings = z.object({
  id: Id,
  name: z.string(),
  street: z.string(),
  city: z.string(),
  state: z.string(),
  zip: z.string(),
  phone: z.string(),
  license: z.string(),
  siteSeesPrices: z.boolean(),
  version: Version,
  logo: z.object({ state: z.enum(logoStates), trouble: z.string().nullable(), version: z.int() }),
});

/** Who left and reaches nothing any more; what is theirs can be erased. */
export const PeopleWhoLeft = z.object({
  items: z.array(z.object({ personId: Id, name: z.string(), places: z.array(z.object({ role: z.string(), place: z.string() })), endedAt: Instant, elsewhere: z.boolean(), erased: z.boolean() })),
});

export type StartFirm = z.infer<typeof StartFirm>;
export type Firm = z.infer<typeof Firm>;
export type FirmSettingsInput = z.infer<typeof FirmSettingsInput>;
export type FirmSettings = z.infer<typeof FirmSettings>;
export type PeopleWhoLeft = z.infer<typeof PeopleWhoLeft>;
