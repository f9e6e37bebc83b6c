import { must } from '../arithmetic/index.ts';
import { cents, type Cents } from './cents.ts';

/**
 * Splits an amount over weights of one sign so that the parts add up exactly: each part rounded towards zero, then the cents
 * left over to the largest remainders, ties to the earlier part. A negative amount splits as the mirror image.
 * Weights are whole numbers. Throws InvalidInput for no weights, mixed signs or all zero.
 */
export function split(amount: Cents, weights: readonly number[], field = 'weights'): Cents[] {
  cents(amount, field);
  must(weights.length > 0, field, weights, 'must hold at least one weight');
  weights.forEach((weight, i) => must(Number.isSafeInteger(weight), `${field}.${i}`, weight, 'must be a whole number'));
  const mixed = weights.some((weight) => weight > 0) && weights.some((weight) => weight < 0);
  must(!mixed, field, weights, 'must all have the same sign');
  const sizes = weights.map((weight) => BigInt(Math.abs(weight)));
  const whole = sizes.reduce((a, b) => a + b, 0n);
  must(whole > 0n, field, weights, 'must not all be zero');

  const total = BigInt(Math.abs(amount));
  const parts = sizes.map((size) => (total * size) / whole);
  let left = total - parts.reduce((a, b) => a + b, 0n);
  const byRemainder = sizes
    .map((size, i) => ({ i, remainder: (total * size) % whole }))
    .sort((a, b) => (a.remainder === b.remainder ? a.i - b.i : a.remainder > b.remainder ? -1 : 1));
  for (const { i } of byRemainder) {
    if (left === 0n) break;
    parts[i] = (parts[i] ?? 0n) + 1n;
    left -= 1n;
  }
  return parts.map((part) => cents(Number(amount < 0 ? -part : part), field));
}
