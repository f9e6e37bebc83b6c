import { must } from '../arithmetic/index.ts';
import { tenThousandths, type Decimal } from '../money/index.ts';

/** A length in inches as decimal text with up to 4 places: a sixteenth is "0.0625". It never passes through a binary float. */
export type Inches = Decimal;

const SCALE = 10_000n;
/** Longer than any house: a mistyped unit is found here. */
const LONGEST = 12_000n * SCALE;

/** A length as ten-thousandths of an inch, more than 0 and at most 1,000 ft. Throws InvalidInput. */
export function lengthOf(value: Inches, field: string): bigint {
  const size = tenThousandths(value, field);
  must(size > 0n && size <= LONGEST, field, value, 'must be a length of more than 0 and at most 1,000 ft, in inches');
  return size;
}

/** The same where nothing may be there at all. Throws InvalidInput. */
export function lengthOrNone(value: Inches, field: string): bigint {
  return tenThousandths(value, field) === 0n ? 0n : lengthOf(value, field);
}

/** Ten-thousandths of an inch as decimal text without trailing zeros. */
export function inchesText(size: bigint): Inches {
  const digits = size.toString().padStart(5, '0');
  const fraction = digits.slice(-4).replace(/0+$/, '');
  return `${digits.slice(0, -4)}${fraction === '' ? '' : `.${fraction}`}`;
}

/** a ÷ b rounded up; both more than 0. */
export const ceilDivide = (a: bigint, b: bigint): bigint => (a + b - 1n) / b;

/** A count as whole number; it came from lengths within bounds. */
export const countOf = (value: bigint): number => Number(value);

// a dash before a fraction joins inches (5-1/2 is five and a half inches), any other dash stands between feet and inches
const FEET = /^(?:(\d{1,4})\s*(?:'|ft\.?|feet|-(?!\s*\d{1,2}\/))\s*)?(?:(\d{1,5}(?:\.\d{1,4})?(?![\d/]))?(?:[\s-]*(\d{1,2})\/(\d{1,2}))?\s*(?:"|in\.?|inches)?)?$/i;

/**
 * What people write for a length, as inches: 12' 6", 12-6, 12 ft 6 1/2 in, 5-1/2", 150.5, 36', 3/4". A bare number is inches.
 * Fractions are halves to sixteenths; beside feet there are fewer than 12 inches. Throws InvalidInput.
 */
export function parseLength(text: string, field = 'length'): Inches {
  const found = FEET.exec(text.trim().replaceAll('’', "'").replaceAll('′', "'").replaceAll('″', '"').replaceAll('”', '"'));
  const [, feet, whole, over, under] = found ?? [];
  must(feet !== undefined || whole !== undefined || over !== undefined, field, text, 'must be a length such as 12\' 6 1/2" or 150.5');
  must(feet === undefined || tenThousandths(whole ?? '0', field) < 12n * SCALE, field, text, 'must have fewer than 12 inches beside its feet');
  const parts = under === undefined ? 0n : fraction(Number(over), Number(under), text, field);
  const size = BigInt(feet ?? 0) * 12n * SCALE + tenThousandths(whole ?? '0', field) + parts;
  must(size > 0n && size <= LONGEST, field, text, 'must be a length of more than 0 and at most 1,000 ft');
  return inchesText(size);
}

function fraction(over: number, under: number, text: string, field: string): bigint {
  must([2, 4, 8, 16].includes(under) && over > 0 && over < under, field, text, 'must have a fraction in halves, quarters, eighths or sixteenths');
  return (BigInt(over) * SCALE) / BigInt(under);
}

/** Inches as feet and inches for people, to the nearest sixteenth: "12 ft 6 1/2 in". */
export function formatLength(value: Inches, field = 'length'): string {
  const sixteenths = (lengthOrNone(value, field) * 16n * 2n + SCALE) / (SCALE * 2n);
  const [feet, rest] = [sixteenths / 192n, sixteenths % 192n];
  const [inches, parts] = [rest / 16n, Number(rest % 16n)];
  const by = parts === 0 ? 1 : parts % 8 === 0 ? 8 : parts % 4 === 0 ? 4 : parts % 2 === 0 ? 2 : 1;
  const small = parts === 0 ? '' : `${inches > 0n ? `${inches} ` : ''}${parts / by}/${16 / by}`;
  const inch = small || (inches > 0n || feet === 0n ? inches.toString() : '');
  return [feet > 0n ? `${feet} ft` : '', inch === '' ? '' : `${inch} in`].filter(Boolean).join(' ');
}
