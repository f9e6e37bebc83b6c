import { must } from '../arithmetic/index.ts';
import { cents, type BasisPoints, type Cents } from './cents.ts';

/**
 * numerator ÷ denominator rounded half away from zero to whole cents; exact, through big integers: −2.5 becomes −3.
 * Throws InvalidInput where the denominator isn't positive or the result is out of range.
 */
export function divideRounded(numerator: bigint, denominator: bigint, field = 'amount'): Cents {
  must(denominator > 0n, field, denominator, 'must be divided by more than zero');
  const negative = numerator < 0n;
  const size = negative ? -numerator : numerator;
  const rounded = (size * 2n + denominator) / (denominator * 2n);
  return cents(Number(negative ? -rounded : rounded), field);
}

/** A rate of an amount, rounded half away from zero to the cent. Throws InvalidInput. */
export function percentOf(amount: Cents, rate: BasisPoints, field = 'amount'): Cents {
  return divideRounded(BigInt(cents(amount, field)) * BigInt(cents(rate, field)), 10_000n, field);
}

/** The same without rounding, in dollars as text, for an arithmetic step: 123.45 at 7.25 % is "8.950125". Throws InvalidInput. */
export function percentExact(amount: Cents, rate: BasisPoints): string {
  return fixed(BigInt(cents(amount)) * BigInt(cents(rate, 'rate')), 6);
}

/** A scaled integer as decimal text without trailing zeros beyond two places: 8950125 with 6 places is "8.950125". */
export function fixed(scaled: bigint, places: number): string {
  const negative = scaled < 0n;
  const digits = (negative ? -scaled : scaled).toString().padStart(places + 1, '0');
  const whole = digits.slice(0, digits.length - places);
  const fraction = digits.slice(digits.length - places).replace(/0+$/, '').padEnd(Math.min(2, places), '0');
  return `${negative ? '-' : ''}${whole}${fraction === '' ? '' : `.${fraction}`}`;
}
