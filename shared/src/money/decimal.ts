import { must } from '../arithmetic/index.ts';
import type { Cents } from './cents.ts';
import { divideRounded, fixed } from './rounding.ts';

const PLACES = 4;
const SCALE = 10_000n;
const SHAPE = /^-?\d{1,12}(\.\d{1,4})?$/;

/** A quantity or a unit cost as text: up to 12 digits, and up to 4 places after the point. It never passes through a binary float. */
export type Decimal = string;

/** A decimal as an integer of ten-thousandths. Throws InvalidInput. */
export function tenThousandths(value: Decimal, field = 'quantity'): bigint {
  must(typeof value === 'string' && SHAPE.test(value), field, value, 'must be a decimal with up to 4 places, such as 12.5');
  const [whole = '0', fraction = ''] = value.replace('-', '').split('.');
  const size = BigInt(whole) * SCALE + BigInt(fraction.padEnd(PLACES, '0'));
  return value.startsWith('-') ? -size : size;
}

/** quantity × unit cost (dollars), rounded half away from zero to the cent: 28 × 43.1875 is 1,209.25. Throws InvalidInput. */
export function extend(quantity: Decimal, unitCost: Decimal, field = 'line'): Cents {
  const product = tenThousandths(quantity, `${field}.quantity`) * tenThousandths(unitCost, `${field}.unitCost`);
  return divideRounded(product, 1_000_000n, field);
}

/** The same without rounding, in dollars as text. */
export function extendExact(quantity: Decimal, unitCost: Decimal): string {
  return fixed(tenThousandths(quantity) * tenThousandths(unitCost), 8);
}
