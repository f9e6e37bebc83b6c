import { InvalidInput } from '../arithmetic/index.ts';
import { cents, type BasisPoints, type Cents } from './cents.ts';

const AMOUNT = /^\$?(\d{1,3}(?:,\d{3})+|\d+)?(?:\.(\d{0,2}))?$/;

/**
 * Reads a sum as people type it: "12,400", "$12400.5", "-250", "−250.00", "(250.00)", spaces anywhere. Returns cents.
 * Throws InvalidInput for anything else, three decimal places included, so that nothing is rounded silently.
 */
export function parseMoney(typed: string, field = 'amount'): Cents {
  const plain = typed.replace(/[\s\u00a0\u202f]/g, '').replace(/[−–]/g, '-');
  const brackets = /^\((.*)\)$/.exec(plain);
  const unsigned = (brackets?.[1] ?? plain).replace(/^([+-])|^(\$)([+-])/, '$2');
  const negative = brackets !== null || /^\$?-/.test(plain);
  const match = AMOUNT.exec(unsigned);
  const fraction = match?.[2] ?? '';
  if (!match || (match[1] === undefined && fraction === '')) {
    throw new InvalidInput(field, typed, 'must be a sum of money such as 12,400.50');
  }
  const size = Number(`${(match[1] ?? '0').replace(/,/g, '')}${fraction.padEnd(2, '0')}`);
  return cents(negative ? -size : size, field);
}

/** Reads a percentage as people type it: "10", "7.25 %". Returns basis points. Throws InvalidInput. */
export function parseRate(typed: string, field = 'rate'): BasisPoints {
  const match = /^(\d{1,3})(?:\.(\d{1,2}))?%?$/.exec(typed.replace(/\s/g, ''));
  if (!match) throw new InvalidInput(field, typed, 'must be a percentage such as 7.25');
  return Number(`${match[1] ?? '0'}${(match[2] ?? '').padEnd(2, '0')}`);
}
