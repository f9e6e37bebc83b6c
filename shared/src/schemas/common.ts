import { z } from 'zod';

// U+0000 and lone surrogates pass JSON but break jsonb and canonical text; other control characters have no business in a name.
const UNSTORABLE = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]|[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/;

const storable = (value: string) => !UNSTORABLE.test(value);

/** Words of people on one or more lines; trimmed, control characters refused. */
export const Text = (most: number, least = 1) =>
  z
    .string()
    .trim()
    .min(least, least <= 1 ? 'Enter something here.' : `Enter at least ${least} characters.`)
    .max(most, `Enter at most ${most} characters.`)
    .refine(storable, 'Remove characters that cannot be stored.');

/** The same on one line. */
export const Line = (most: number, least = 1) => Text(most, least).refine((value) => !/[\n\r]/.test(value), 'Enter this on one line.');

export const Id = z.uuid('Must be an id.');

const realDate = (value: string) => {
  const date = new Date(`${value}T00:00:00Z`);
  return !Number.isNaN(date.getTime()) && date.toISOString().startsWith(value);
};
/** A business date, YYYY-MM-DD, from 2000 to 2100; it never carries a time or a zone. */
export const BusinessDate = z
  .string()
  .regex(/^(20\d{2}|2100)-\d{2}-\d{2}$/, 'Enter a date such as March 3, 2027.')
  .refine(realDate, 'That day does not exist in the calendar.');

export const Instant = z.iso.datetime();

/** Whole cents, at most 999,999,999.99 either way. */
export const Cents = z.int('Enter a sum such as 12,400.50.').min(-99_999_999_999, 'The sum is too large.').max(99_999_999_999, 'The sum is too large.');
export const PositiveCents = Cents.min(1, 'Must be more than zero.');
export const NonNegativeCents = Cents.min(0, 'Must not be negative.');
/** Basis points, 0 to 100 %. */
export const Rate = z.int('Enter a percentage such as 7.25.').min(0, 'Must not be negative.').max(10_000, 'Must not be more than 100 %.');
/** A quantity or unit cost as decimal text with up to 4 places. */
export const Decimal = z.string().regex(/^-?\d{1,12}(\.\d{1,4})?$/, 'Enter a number with up to 4 places.');

export const Email = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'The address is too long.')
  .pipe(z.email('Enter a mail address such as name@example.com.'));

/** An IANA time zone that this machine knows. */
export const TimeZone = z.string().refine((zone) => {
  try {
    return new Intl.DateTimeFormat('en-US', { timeZone: zone }).resolvedOptions().timeZone.length > 0;
  } catch {
    return false;
  }
}, 'Choose a time zone.');

export const Version = z.int().min(1);
export const Sha256 = z.string().regex(/^[0-9a-f]{64}$/);

export const ListQuery = z.strictObject({
  limit: z.coerce.number().int().min(1).max(200).default(50),
  cursor: z.string().max(400).optional(),
});
export type ListQuery = z.infer<typeof ListQuery>;

export const list = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), next: z.string().nullable() });
