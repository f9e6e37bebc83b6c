import { must } from '../arithmetic/index.ts';

/** Whole US cents, within the range that a number holds exactly (±9,007,199,254,740,991). */
export type Cents = number;
/** Hundredths of a percent: 10,000 is 100 %. */
export type BasisPoints = number;

/** Checks that a value is whole cents in the safe range; −0 becomes 0. Throws InvalidInput. */
export function cents(value: number, field = 'amount'): Cents {
  must(Number.isSafeInteger(value), field, value, 'must be whole cents within ±90,071,992,547,409.91');
  return value === 0 ? 0 : value;
}

/** Checks a rate in basis points: a whole number from `least` to `most`. Throws InvalidInput. */
export function basisPoints(value: number, field = 'rate', least = 0, most = 10_000): BasisPoints {
  must(Number.isSafeInteger(value), field, value, 'must be a whole number of basis points');
  must(value >= least && value <= most, field, value, `must be from ${least / 100} % to ${most / 100} %`);
  return value === 0 ? 0 : value;
}

/** Sum of amounts; an overflow is an error, never a rounded number. Throws InvalidInput. */
export function sum(amounts: Iterable<Cents>, field = 'sum'): Cents {
  let total = 0;
  for (const amount of amounts) total = cents(total + cents(amount, field), field);
  return total;
}

/** a − b, checked. Throws InvalidInput. */
export function minus(a: Cents, b: Cents, field = 'difference'): Cents {
  return cents(cents(a, field) - cents(b, field), field);
}

/** The amount itself or 0, whichever is more. */
export const atLeastZero = (amount: Cents): Cents => (amount > 0 ? amount : 0);
